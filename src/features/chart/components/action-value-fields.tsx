import { formatDuration } from '../../../../shared/format';
import type { ActionValue, EstimateReceptor } from '../../../../shared/schemas/estimate';
import { displayUnitOf, fromConcentrationUnit, toConcentrationUnit, unitLabel } from '../../../../shared/units';
import { Button } from '../../../components/button';
import { Field } from '../../../components/field';
import { TextInput } from '../../../components/inputs';
import { NumberInput } from '../../../components/number-input';
import { useChart, useErrorAt } from '../hooks/chart-context';

/** Action values of one receptor for this estimate; changing them here leaves the register alone. */
export function ActionValueFields({ receptor, index }: { receptor: EstimateReceptor; index: number }) {
  const { draft, change } = useChart();
  const set = (actionValues: ActionValue[], key = '') =>
    change((now) => ({ ...now, receptors: now.receptors.map((one) => (one.id === receptor.id ? { ...one, actionValues } : one)) }), key);
  const fresh: ActionValue = { value: draft.substance?.measure === 'count' ? 1e4 : 1e-6, basis: draft.substance?.basis ?? '', averagingS: 0, source: '', label: '' };
  return (
    <div className="flex flex-col gap-2 pb-2 pl-8">
      {receptor.actionValues.length === 0 && <p className="text-note text-ink2">No action value for this substance: exceedance cannot be judged here.</p>}
      {receptor.actionValues.map((value, i) => (
        <ActionValueRow
          key={i}
          value={value}
          measure={draft.substance?.measure ?? 'mass'}
          path={`receptors.${index}.actionValues.${i}`}
          onChange={(next) => set(receptor.actionValues.map((one, at) => (at === i ? next : one)), `${receptor.id}.action.${i}`)}
          onRemove={() => set(receptor.actionValues.filter((_, at) => at !== i))}
        />
      ))}
      <Button kind="quiet" icon="add" className="self-start" onClick={() => set([...receptor.actionValues, fresh])}>
        Add an action value
      </Button>
    </div>
  );
}

type RowProps = { value: ActionValue; measure: 'mass' | 'count'; path: string; onChange: (next: ActionValue) => void; onRemove: () => void };

function ActionValueRow({ value, measure, path, onChange, onRemove }: RowProps) {
  const error = useErrorAt(path);
  const unit = displayUnitOf(value.value, measure);
  const label = unitLabel[unit];
  return (
    <div className="grid grid-cols-[1fr_1fr_auto] items-start gap-2">
      <Field label="Action value" unit={label} error={error} hint={value.averagingS > 0 ? `mean over ${formatDuration(value.averagingS)}` : undefined}>
        <NumberInput value={Number(toConcentrationUnit(value.value, unit).toPrecision(8))} min={0} onChange={(typed) => onChange({ ...value, value: fromConcentrationUnit(typed ?? 0, unit) })} />
      </Field>
      <Field label="Whose it is">
        <TextInput value={value.source} onChange={(event) => onChange({ ...value, source: event.target.value })} />
      </Field>
      <Button kind="quiet" icon="close" aria-label="Remove this action value" className="mt-6" onClick={onRemove} />
    </div>
  );
}
