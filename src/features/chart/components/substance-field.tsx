import { Link } from 'react-router-dom';
import { formatDuration } from '../../../../shared/format';
import type { EstimateSubstance } from '../../../../shared/schemas/estimate';
import { Field } from '../../../components/field';
import { CheckInput, SelectInput } from '../../../components/inputs';
import { useChart, useErrorAt } from '../hooks/chart-context';
import { chooseSubstance } from '../model/draft-actions';
import { unitScales } from '../model/unit-scales';
import { UnitField } from './unit-fields';

/** Which substance; its entry brings density, share that counts, losses and the receptors' action values. */
export function SubstanceField() {
  const { draft, change, registers } = useChart();
  const { substance } = draft;
  const choose = (id: string) => {
    const item = registers.substances.find((one) => one.id === id);
    if (item) change((now) => chooseSubstance(now, item, registers));
  };
  const isKnown = registers.substances.some((item) => item.id === substance?.registerId);
  return (
    <>
      <Field
        label="Substance"
        error={useErrorAt('substance')}
        hint={
          substance?.registerId ? (
            <>
              {[substance.cas && `CAS ${substance.cas}`, substance.basis && `reckoned ${substance.basis}`].filter(Boolean).join(', ')} <Link to={`/substances/${substance.registerId}`}>See its entry</Link>
            </>
          ) : undefined
        }
      >
        <SelectInput value={substance?.registerId ?? ''} onChange={(event) => choose(event.target.value)}>
          <option value="" disabled>
            {substance && !isKnown ? substance.name : 'Choose a substance'}
          </option>
          {registers.substances
            .filter((item) => !item.isArchived || item.id === substance?.registerId)
            .map((item) => (
              <option key={item.id} value={item.id}>
                {item.name}
              </option>
            ))}
        </SelectInput>
      </Field>
      {substance && <LossFields substance={substance} onChange={(next) => change((now) => ({ ...now, substance: next }), 'loss')} />}
    </>
  );
}

/** Losses are off unless ticked; their rates may be set for this estimate alone. */
function LossFields({ substance, onChange }: { substance: EstimateSubstance; onChange: (next: EstimateSubstance) => void }) {
  const { loss } = substance;
  const isCount = substance.measure === 'count';
  if (loss.kind === 'none') return null;
  const setRate = (patch: Partial<Record<'ratePerS' | 'dayRatePerS' | 'nightRatePerS', number>>) => onChange({ ...substance, loss: { ...loss, ...patch, source: 'typed for this estimate' } });
  return (
    <>
      <CheckInput
        label="Reckon with losses"
        hint={`${lossWords(substance)}. Left unticked the estimate is conservative, and figures with losses stand beside it`}
        checked={substance.applyLoss}
        onChange={(event) => onChange({ ...substance, applyLoss: event.target.checked })}
      />
      {substance.applyLoss && loss.kind === 'first-order' && <LifeField label={isCount ? 'T90' : 'Half-life'} fold={isCount ? Math.LN10 : Math.LN2} ratePerS={loss.ratePerS} onRate={(ratePerS) => setRate({ ratePerS })} />}
      {substance.applyLoss && loss.kind === 'day-night' && (
        <>
          <LifeField label={isCount ? 'T90 by day' : 'Half-life by day'} fold={isCount ? Math.LN10 : Math.LN2} ratePerS={loss.dayRatePerS} onRate={(dayRatePerS) => setRate({ dayRatePerS })} />
          <LifeField label={isCount ? 'T90 by night' : 'Half-life by night'} fold={isCount ? Math.LN10 : Math.LN2} ratePerS={loss.nightRatePerS} onRate={(nightRatePerS) => setRate({ nightRatePerS })} />
        </>
      )}
    </>
  );
}

/** A loss rate as the time in which half, or nine tenths, are gone. An empty field leaves the rate as it was. */
function LifeField({ label, fold, ratePerS, onRate }: { label: string; fold: number; ratePerS: number; onRate: (ratePerS: number) => void }) {
  return <UnitField label={label} scales={[unitScales.duration[1], unitScales.duration[0], unitScales.duration[2]]} value={ratePerS > 0 ? fold / ratePerS : null} onChange={(s) => s !== null && s > 0 && onRate(fold / s)} />;
}

function lossWords({ loss }: EstimateSubstance): string {
  if (loss.kind === 'first-order') return `Half-life ${formatDuration(Math.LN2 / loss.ratePerS)}${loss.source && `, ${loss.source}`}`;
  if (loss.kind === 'day-night') return `T90 ${formatDuration(Math.LN10 / loss.dayRatePerS)} by day, ${formatDuration(Math.LN10 / loss.nightRatePerS)} by night${loss.source && `, ${loss.source}`}`;
  return 'No loss';
}
