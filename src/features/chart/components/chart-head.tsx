import type { ReactNode } from 'react';
import { Link, useNavigate } from 'react-router-dom';
import { instantMs } from '../../../../shared/civil';
import { formatClock, formatTimeOfDay } from '../../../../shared/format';
import type { Scenario } from '../../../../shared/schemas/incidents';
import { MarkingWord } from '../../../components/marking-band';
import { Menu } from '../../../components/menu';

type Props = { scenario: Scenario; offset: string; shownRevision: number | null; state: ReactNode; actions: ReactNode };

/** One line: marking, where we are, what is saved, what can be done. */
export function ChartHead({ scenario, offset, shownRevision, state, actions }: Props) {
  const navigate = useNavigate();
  const latest = scenario.revisions.reduce((most, revision) => Math.max(most, revision.number), 0);
  const clock = (iso: string) => formatClock(instantMs(iso), offset);
  return (
    <header className="flex flex-wrap items-center gap-x-4 gap-y-1 border-b border-rule bg-paper px-3 py-1.5 sm:px-4">
      <MarkingWord marking={scenario.marking} />
      <h1 className="min-w-0 flex-1 basis-40 truncate">
        <Link to={`/incidents/${scenario.incidentId}`} className="text-ink2 max-sm:hidden">
          {scenario.incidentNumber} {scenario.incidentName}
        </Link>
        <span className="text-ink2 max-sm:hidden"> / </span>
        <span className="font-semibold">{scenario.name}</span>
      </h1>
      <div className="flex items-center gap-x-3 gap-y-1 max-sm:w-full max-sm:justify-between max-sm:gap-x-1 sm:flex-wrap">
        {latest > 0 && (
          <span className="print:hidden">
            <Menu
              label={shownRevision === null ? 'Draft' : `Revision ${shownRevision}`}
              kind="quiet"
              anchor="bottom end"
              entries={[
                { label: `Draft, ${scenario.draftSavedBy}, ${clock(scenario.draftSavedAt)}`, isChosen: shownRevision === null, onSelect: () => void navigate(`/scenarios/${scenario.id}`) },
                ...[...scenario.revisions]
                  .sort((a, b) => b.number - a.number)
                  .map((revision) => ({
                    label: `Revision ${revision.number}, ${revision.savedBy}, ${clock(revision.savedAt)}${revision.runState === null || revision.runState === 'done' ? '' : `, run ${revision.runState}`}`,
                    isChosen: shownRevision === revision.number,
                    onSelect: () => void navigate(`/scenarios/${scenario.id}?revision=${revision.number}`),
                  })),
              ]}
            />
          </span>
        )}
        {state}
        <span className="flex items-center gap-1 print:hidden max-sm:gap-0">{actions}</span>
      </div>
    </header>
  );
}

/** "saved 06:52", with the day when it was not today. */
export function savedWords(iso: string, offset: string, nowMs: number): string {
  const ms = instantMs(iso);
  return nowMs - ms < 18 * 3_600_000 ? `draft kept ${formatTimeOfDay(ms, offset)}` : `draft kept ${formatClock(ms, offset)}`;
}
