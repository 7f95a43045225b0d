import { civilAt, instantMs } from '../../../../shared/civil';
import { formatClock, formatDay, formatDayYear, formatOffset, formatTimeOfDay } from '../../../../shared/format';
import type { NextArrival } from '../../../../shared/schemas/incidents';
import { RuledList, RuledRow } from '../../../components/ruled-list';
import { StatusWord } from '../../../components/status-word';
import { countdownTo, isFarOff } from '../countdown';

type ArrivalListProps = { label: string; arrivals: readonly NextArrival[]; offset: string; nowMs: number; isFirstLarge?: boolean };

/** Coming arrivals in order: what is left of the time in large figures, whom it reaches, and by when to begin closing. */
export function ArrivalList({ label, arrivals, offset, nowMs, isFirstLarge = true }: ArrivalListProps) {
  return (
    <RuledList label={label} isOrdered>
      {arrivals.map((arrival, i) => (
        <ArrivalRow key={`${arrival.runId}-${arrival.receptorCode}-${arrival.earliestAt}`} arrival={arrival} offset={offset} nowMs={nowMs} isLarge={isFirstLarge && i === 0} />
      ))}
    </RuledList>
  );
}

function ArrivalRow({ arrival, offset, nowMs, isLarge }: { arrival: NextArrival; offset: string; nowMs: number; isLarge: boolean }) {
  const earliest = instantMs(arrival.earliestAt);
  return (
    <RuledRow
      to={`/scenarios/${arrival.scenarioId}?run=${arrival.runId}`}
      openLabel={`Open the forecast for ${arrival.receptorCode} ${arrival.receptorName}`}
      leadWidth="wide"
      lead={<Lead ms={earliest} offset={offset} nowMs={nowMs} isLarge={isLarge} />}
      trail={arrival.closeByAt && <CloseBy atMs={instantMs(arrival.closeByAt)} offset={offset} nowMs={nowMs} />}
    >
      <p className="text-lead">
        <span className="mr-2 font-semibold">{arrival.receptorCode}</span>
        {arrival.receptorName}
      </p>
      <p className="text-ink2">
        {earliest < nowMs ? 'may be there since ' : 'earliest '}
        <time dateTime={arrival.earliestAt} className="whitespace-nowrap">
          <span className="font-semibold text-ink">{clockFrom(earliest, nowMs, offset)}</span> {formatOffset(offset)}
        </time>
        <Likely arrival={arrival} offset={offset} />
      </p>
      <p className="text-note break-words text-ink2">{arrival.scenarioName}</p>
    </RuledRow>
  );
}

/** What is left of the time; the hour itself where counting down would say nothing. */
function Lead({ ms, offset, nowMs, isLarge }: { ms: number; offset: string; nowMs: number; isLarge: boolean }) {
  const { text, isPast } = countdownTo(ms, nowMs);
  const isFar = isFarOff(ms, nowMs);
  return (
    <div className="flex flex-wrap items-baseline gap-x-2 sm:block">
      <div className={`${isLarge ? 'text-title' : 'text-figure'} font-semibold whitespace-nowrap text-ink`}>{isFar ? formatTimeOfDay(ms, offset) : text}</div>
      <div className="text-note">{isFar ? `earliest arrival, ${formatDayYear(ms, offset)}` : isPast ? 'since the earliest arrival' : 'to the earliest arrival'}</div>
    </div>
  );
}

/** The year is said as soon as it is not the present one. */
const clockFrom = (ms: number, nowMs: number, offset: string): string =>
  civilAt(ms, offset).year === civilAt(nowMs, offset).year ? formatClock(ms, offset) : `${formatDayYear(ms, offset)} ${formatTimeOfDay(ms, offset)}`;

function Likely({ arrival, offset }: { arrival: NextArrival; offset: string }) {
  if (arrival.likelyAt === null) return <>, only with the high amount</>;
  const earliest = instantMs(arrival.earliestAt);
  const likely = instantMs(arrival.likelyAt);
  const isOneDay = formatDay(earliest, offset) === formatDay(likely, offset);
  return (
    <>
      {', likely '}
      <time dateTime={arrival.likelyAt} className="whitespace-nowrap">
        {isOneDay ? formatTimeOfDay(likely, offset) : formatClock(likely, offset)}
      </time>
    </>
  );
}

function CloseBy({ atMs, offset, nowMs }: { atMs: number; offset: string; nowMs: number }) {
  const { text, isPast } = countdownTo(atMs, nowMs);
  return (
    <div className="pointer-events-none sm:w-44 sm:text-right">
      <div className="whitespace-nowrap">
        <span className="text-ink2">begin closing by </span>
        <span className="text-lead font-semibold">{formatTimeOfDay(atMs, offset)}</span>
      </div>
      <div className="text-note">{isFarOff(atMs, nowMs) ? <span className="text-ink2">{formatDayYear(atMs, offset)}</span> : isPast ? <StatusWord tone="attention">passed {text === 'now' ? 'just now' : `${text} ago`}</StatusWord> : <span className="text-ink2">in {text}, {formatDay(atMs, offset)}</span>}</div>
    </div>
  );
}
