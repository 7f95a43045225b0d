import { Link } from 'react-router-dom';
import { formatDuration } from '../../../../shared/format';
import type { EstimateSubstance } from '../../../../shared/schemas/estimate';
import { Field } from '../../../components/field';
import { CheckInput, SelectInput } from '../../../components/inputs';
import { useChart, useErrorAt } from '../hooks/chart-context';
import { chooseSubstance } from '../model/draft-actions';

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
      {substance && substance.loss.kind !== 'none' && (
        <CheckInput
          label="Reckon with losses"
          hint={`${lossWords(substance)}. Left unticked the estimate is conservative, and figures with losses stand beside it`}
          checked={substance.applyLoss}
          onChange={(event) => change((now) => (now.substance ? { ...now, substance: { ...now.substance, applyLoss: event.target.checked } } : now))}
        />
      )}
    </>
  );
}

function lossWords({ loss }: EstimateSubstance): string {
  if (loss.kind === 'first-order') return `Half-life ${formatDuration(Math.LN2 / loss.ratePerS)}${loss.source && `, ${loss.source}`}`;
  if (loss.kind === 'day-night') return `T90 ${formatDuration(Math.LN10 / loss.dayRatePerS)} by day, ${formatDuration(Math.LN10 / loss.nightRatePerS)} by night${loss.source && `, ${loss.source}`}`;
  return 'No loss';
}
