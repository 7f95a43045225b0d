import { amountOf } from '../../../../shared/amount';
import { formatAmount, formatEntered, formatNumber } from '../../../../shared/format';
import { amountSchema, type Amount } from '../../../../shared/schemas/estimate';
import { Field } from '../../../components/field';
import { SelectInput } from '../../../components/inputs';
import { NumberInput } from '../../../components/number-input';
import { useChart, useErrorAt } from '../hooks/chart-context';
import { changeForm, formsFor, type AmountHow } from '../model/amount-forms';
import type { DraftAmount, DraftRelease } from '../model/draft';
import { changeRelease, substanceItem } from '../model/draft-actions';
import { unitScales } from '../model/unit-scales';
import { UnitField, UnitRangeField } from './unit-fields';

/** How much: form, figures with their range, and the working that leads to kilograms. */
export function AmountFields({ release, index }: { release: DraftRelease; index: number }) {
  const { draft, change, registers } = useChart();
  const path = `releases.${index}.amount`;
  const measure = draft.substance?.measure ?? 'mass';
  const { amount } = release;
  const set = (next: DraftAmount, field = 'amount') => change((now) => changeRelease(now, release.id, (one) => ({ ...one, amount: next })), `${release.id}.${field}`);
  return (
    <>
      <Field label="Amount given as" error={useErrorAt(`${path}.how`)}>
        <SelectInput value={amount.how} onChange={(event) => set(changeForm(amount, event.target.value as AmountHow, substanceItem(draft, registers)?.data ?? null), '')}>
          {formsFor(measure).map((form) => (
            <option key={form.how} value={form.how}>
              {form.words}
            </option>
          ))}
        </SelectInput>
      </Field>
      <FormFields amount={amount} path={path} onChange={set} basis={draft.substance?.basis ?? ''} measure={measure} />
      <Working amount={amount} measure={measure} basis={draft.substance?.basis ?? ''} />
    </>
  );
}

type FormProps = { amount: DraftAmount; path: string; onChange: (next: DraftAmount) => void; basis: string; measure: 'mass' | 'count' };

function FormFields({ amount, path, onChange, basis, measure }: FormProps) {
  const massError = useErrorAt(`${path}.massKg`);
  const volumeError = useErrorAt(`${path}.volumeM3`);
  const strengthError = useErrorAt(`${path}.strengthKgM3`);
  const densityError = useErrorAt(`${path}.densityKgM3`);
  const countError = useErrorAt(`${path}.count`);
  const perVolumeError = useErrorAt(`${path}.countPerM3`);
  const standInError = useErrorAt(`${path}.standIn`);
  switch (amount.how) {
    case 'mass':
      return (
        <>
          <UnitRangeField label="Mass spilled" scales={unitScales.mass} value={amount.massKg} error={massError} onChange={(massKg) => onChange({ ...amount, massKg })} />
          <FractionField value={amount.activeFraction} path={path} basis={basis} onChange={(activeFraction) => onChange({ ...amount, activeFraction })} />
        </>
      );
    case 'volume-strength':
      return (
        <>
          <UnitRangeField label="Volume spilled" scales={unitScales.volume} value={amount.volumeM3} error={volumeError} onChange={(volumeM3) => onChange({ ...amount, volumeM3 })} />
          <UnitField label={`Strength${basis ? `, ${basis}` : ''}`} scales={unitScales.strength} value={amount.strengthKgM3} error={strengthError} onChange={(strengthKgM3) => onChange({ ...amount, strengthKgM3 })} />
        </>
      );
    case 'volume-density':
      return (
        <>
          <UnitRangeField label="Volume spilled" scales={unitScales.volume} value={amount.volumeM3} error={volumeError} onChange={(volumeM3) => onChange({ ...amount, volumeM3 })} />
          <UnitField label="Density" scales={unitScales.density} value={amount.densityKgM3} error={densityError} onChange={(densityKgM3) => onChange({ ...amount, densityKgM3 })} />
          <FractionField value={amount.activeFraction} path={path} basis={basis} onChange={(activeFraction) => onChange({ ...amount, activeFraction })} />
        </>
      );
    case 'count':
      return <UnitRangeField label="Organisms released" scales={unitScales.count} value={amount.count} error={countError} hint="Powers of ten may be typed as 9e13" onChange={(count) => onChange({ ...amount, count })} />;
    case 'volume-count':
      return (
        <>
          <UnitRangeField label="Volume spilled" scales={unitScales.volume} value={amount.volumeM3} error={volumeError} onChange={(volumeM3) => onChange({ ...amount, volumeM3 })} />
          <UnitField label="Organisms per volume" scales={unitScales.countDensity} value={amount.countPerM3} error={perVolumeError} onChange={(countPerM3) => onChange({ ...amount, countPerM3 })} />
        </>
      );
    case 'unknown':
      return (
        <UnitField
          label="Plan with"
          isOptional
          scales={measure === 'count' ? unitScales.count : unitScales.mass}
          value={amount.standIn}
          error={standInError}
          hint="A stand-in, for example the largest credible amount. Left empty, answers are per kilogram and nothing is said to exceed"
          onChange={(standIn) => onChange({ ...amount, standIn })}
        />
      );
  }
}

function FractionField({ value, path, basis, onChange }: { value: number | null; path: string; basis: string; onChange: (value: number | null) => void }) {
  const error = useErrorAt(`${path}.activeFraction`);
  return (
    <Field label={`Share that counts${basis ? `, ${basis}` : ''}`} unit="kg per kg spilled" hint="From the substance's entry; 1 is the pure substance" error={error}>
      <NumberInput value={value} onChange={onChange} min={0} max={1} step={0.01} />
    </Field>
  );
}

/** The sum written out: 4,000 kg × 0.206 = 820 kg as N. */
function Working({ amount, measure, basis }: { amount: DraftAmount; measure: 'mass' | 'count'; basis: string }) {
  const parsed = amountSchema.safeParse(amount);
  if (!parsed.success) return null;
  const figures = amountOf(parsed.data);
  if (figures.likely === null) return <p className="text-note text-ink2">Amount not known: results per kilogram released.</p>;
  const say = (value: number) => `${formatAmount(value, measure).text} ${formatAmount(value, measure).unit}`;
  const range = figures.low !== null || figures.high !== null ? ` (${say(figures.low ?? figures.likely)} to ${say(figures.high ?? figures.likely)})` : '';
  return (
    <p className="border-l-4 border-rule pl-3 text-note text-ink2">
      {substituted(parsed.data)} = <strong className="text-ink">{say(figures.likely)}</strong>
      {basis && ` ${basis}`}
      {range}
    </p>
  );
}

function substituted(amount: Amount): string {
  switch (amount.how) {
    case 'mass':
      return amount.activeFraction === 1 ? 'Mass' : `${formatEntered(amount.massKg.likely)} kg × ${formatEntered(amount.activeFraction)}`;
    case 'volume-strength':
      return `${formatEntered(amount.volumeM3.likely)} m³ × ${formatEntered(amount.strengthKgM3)} kg/m³`;
    case 'volume-density':
      return `${formatEntered(amount.volumeM3.likely)} m³ × ${formatEntered(amount.densityKgM3)} kg/m³${amount.activeFraction === 1 ? '' : ` × ${formatEntered(amount.activeFraction)}`}`;
    case 'count':
      return 'Count';
    case 'volume-count':
      return `${formatEntered(amount.volumeM3.likely)} m³ × ${formatNumber(amount.countPerM3)} per m³`;
    case 'unknown':
      return 'Planned with';
  }
}
