import { Link } from 'react-router-dom';
import type { Incident } from '../../../../shared/schemas/incidents';
import { MarkingBand } from '../../../components/marking-band';
import { TimeText } from '../../../components/time-text';
import { ArrivalList } from './arrival-list';

const SHOWN = 5;

/** One open incident on the Watch, under its own marking. */
export function WatchIncident({ incident, nowMs }: { incident: Incident; nowMs: number }) {
  const { nextArrivals, utcOffset } = incident;
  const more = nextArrivals.length - SHOWN;
  return (
    <article aria-labelledby={`incident-${incident.id}`} className="pt-8">
      <MarkingBand marking={incident.marking} />
      <header className="flex flex-wrap items-baseline justify-between gap-x-6 gap-y-1 border-b border-edge py-3">
        <h2 id={`incident-${incident.id}`} className="min-w-0 text-figure font-semibold break-words">
          <Link to={`/incidents/${incident.id}`} className="inline-block text-ink hover:text-kingfisher pointer-coarse:py-1.5">
            {incident.name}
          </Link>
        </h2>
        <p className="text-ink2">
          {incident.number}, open since <TimeText iso={incident.openedAt} offset={utcOffset} />
        </p>
      </header>
      {nextArrivals.length > 0 ? (
        <ArrivalList label={`Next arrivals, ${incident.name}`} arrivals={nextArrivals.slice(0, SHOWN)} offset={utcOffset} nowMs={nowMs} />
      ) : (
        <p className="border-b border-rule py-4 text-ink2">
          {incident.scenarioCount === 0 ? 'No scenario yet: open the incident and add one.' : 'No saved forecast has an arrival still to come. This does not say that the water is fit for any use.'}
        </p>
      )}
      {more > 0 && (
        <p className="py-2">
          <Link to={`/incidents/${incident.id}`} className="inline-flex min-h-6 items-center">
            {more} more {more === 1 ? 'arrival' : 'arrivals'}
          </Link>
        </p>
      )}
    </article>
  );
}
