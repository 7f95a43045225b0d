import { formatOffset, type Measure } from '../../../../shared/format';
import type { EstimateReceptor } from '../../../../shared/schemas/estimate';
import type { ReceptorAnswer } from '../../../../shared/schemas/estimate-result';
import { Icon } from '../../../components/icon';
import { CheckInput } from '../../../components/inputs';
import { classNames } from '../../../lib/class-names';
import { ReceptorPlate } from '../../../map/receptor-plate';
import { plateStateOf } from '../../../map/receptor-plates';
import { useChart } from '../hooks/chart-context';
import { arrivalSpan, sayRange, type Clock } from '../model/arrival-words';
import { tickReceptor } from '../model/draft-actions';
import type { byArrival } from '../model/rail-lanes';
import { ActionValueFields } from './action-value-fields';

export type Rows = ReturnType<typeof byArrival>;
type Props = { rows: Rows; clock: Clock; measure: Measure; selectedId: string | null; onSelect: (id: string) => void; isBehind: boolean };

/** Whom it reaches, in the order in which it does. Opening one pins its curve in the drawer. */
export function ReceptorsPanel({ rows, clock, measure, selectedId, onSelect, isBehind }: Props) {
  const { draft } = useChart();
  if (draft.receptors.length === 0) return <p className="text-ink2">{draft.water ? `No receptor is registered on ${draft.water.name}.` : 'All registered receptors on the water will stand here.'}</p>;
  const leftOut = draft.receptors.filter((receptor) => draft.leftOut.includes(receptor.id));
  return (
    <>
      <p className="text-note text-ink2">Earliest to latest arrival above the action value, {formatOffset(clock.offset)}</p>
      <ol className={classNames('list-none', isBehind && 'opacity-55')} aria-label="Receptors, by arrival">
        {rows.map(({ receptor, answer, number }) => (
          <ReceptorRow key={receptor.id} receptor={receptor} answer={answer} number={number} clock={clock} measure={measure} isSelected={receptor.id === selectedId} onSelect={onSelect} />
        ))}
      </ol>
      <ReceptorChoice leftOutCount={leftOut.length} />
    </>
  );
}

function ReceptorRow({ receptor, answer, number, clock, measure, isSelected, onSelect }: { receptor: EstimateReceptor; answer: ReceptorAnswer | null; number: number; clock: Clock; measure: Measure; isSelected: boolean; onSelect: (id: string) => void }) {
  const span = answer ? arrivalSpan(clock, answer) : null;
  return (
    <li className={classNames('border-b border-rule', isSelected && 'bg-kingfisher-wash')}>
      <button type="button" aria-pressed={isSelected} onClick={() => onSelect(receptor.id)} className="grid min-h-11 w-full grid-cols-[2.25rem_1fr] items-start gap-x-2 px-1 py-2 text-left hover:bg-sheet">
        <span className="row-span-3">
          <ReceptorPlate kind={receptor.kind} number={number} state={plateStateOf(answer ?? undefined)} />
        </span>
        <span className="min-w-0 truncate">
          <strong className="font-semibold">{receptor.code}</strong> {receptor.name}
        </span>
        {span && <span className="text-lead font-semibold">{span}</span>}
        <span className="text-note text-ink2">{answer ? `${answer.verdict}, ${answer.peak.likely === 0 ? '' : 'peak '}${sayRange(answer.peak, measure)}` : 'not solved yet'}</span>
      </button>
    </li>
  );
}

/** Which receptors are estimated, and at what concentration somebody acts there. */
function ReceptorChoice({ leftOutCount }: { leftOutCount: number }) {
  const { draft, change, isReadOnly } = useChart();
  return (
    <details className="group">
      <summary className="flex min-h-11 items-center gap-2 font-semibold text-kingfisher">
        <Icon name="right" className="size-3.5 group-open:rotate-90" />
        Receptors and action values{leftOutCount > 0 && `, ${leftOutCount} left out`}
      </summary>
      <fieldset disabled={isReadOnly} className="flex flex-col">
        {draft.receptors.map((receptor, index) => (
          <div key={receptor.id} className="border-b border-rule py-1">
            <CheckInput
              label={`${receptor.code} ${receptor.name}`}
              checked={!draft.leftOut.includes(receptor.id)}
              onChange={(event) => change((now) => tickReceptor(now, receptor.id, event.target.checked))}
            />
            {!draft.leftOut.includes(receptor.id) && <ActionValueFields receptor={receptor} index={index} />}
          </div>
        ))}
      </fieldset>
    </details>
  );
}
