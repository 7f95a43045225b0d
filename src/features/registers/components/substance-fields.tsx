import { useFormContext } from 'react-hook-form';
import { formatDuration, formatNumber } from '../../../../shared/format';
import type { Loss } from '../../../../shared/schemas/estimate';
import { rateFromHalfLife } from '../../../../shared/units';
import { Field } from '../../../components/field';
import { NumberInput } from '../../../components/number-input';
import { Section } from '../../../components/page';
import { choicesOf, useWords } from '../model/register-words';
import { readNames, writeNames } from '../model/text-rows';
import { FieldGrid, LongTextField, NumberField, Reading, SelectField, TextField, useValue } from './bound-fields';
import { useIsWriting } from './entry-mode';
import { RowsEditor } from './rows-editor';
import { RowsTextField } from './rows-text-field';
import { NotesSection } from './notes-section';

export const unitChoices = [
  { value: 'ug/l', label: 'µg/l' },
  { value: 'mg/l', label: 'mg/l' },
  { value: 'counts/100ml', label: 'counts/100 ml' },
];
const measures = [
  { value: 'mass', label: 'Weighed (kg)' },
  { value: 'count', label: 'Counted (organisms)' },
];
const losses = [
  { value: 'none', label: 'None: stays as it is' },
  { value: 'first-order', label: 'First order, one rate' },
  { value: 'day-night', label: 'First order, by day and by night' },
];
const emptyLoss: Record<string, Record<string, unknown>> = {
  none: { kind: 'none' },
  'first-order': { kind: 'first-order', ratePerS: null, source: '' },
  'day-night': { kind: 'day-night', dayRatePerS: null, nightRatePerS: null, sunriseHour: 6, sunsetHour: 20, source: '' },
};

export function SubstanceFields() {
  const measure = useValue<string>('data.measure');
  const unit = measure === 'count' ? 'counts/100ml' : 'ug/l';
  return (
    <>
      <Section title="Identity">
        <FieldGrid>
          <RowsTextField name="data.otherNames" label="Other names" hint="With a comma between them" isLine isOptional read={readNames} write={writeNames} summary={writeNames} />
          <TextField name="data.cas" label="CAS number" hint="For example 108-95-2" isOptional />
          <TextField name="data.unNumber" label="UN number" isOptional />
          <SelectField name="data.measure" label="Measured as" choices={measures} />
          <TextField name="data.basis" label="Basis" hint='What its figures count: "as N", "as Cr", "dissolved"' isOptional />
          <TextField name="data.form" label="Form as spilled" hint="For example: aqueous solution 25 %" isOptional className="sm:col-span-2 lg:col-span-1" />
        </FieldGrid>
      </Section>
      <Section title="Properties">
        <FieldGrid>
          {measure !== 'count' && <NumberField name="data.activeFraction" label="Active fraction" unit="kg/kg" hint="kg on the basis above in 1 kg as spilled." range="Above 0, at most 1." />}
          <NumberField name="data.productDensityKgM3" label="Density as spilled" unit="kg/m³" range="Above 0, at most 20,000." isOptional />
          {measure !== 'count' && <NumberField name="data.solubilityKgM3" label="Solubility" unit="kg/m³" hint="Caps the forecast." range="Above 0, at most 10,000." isOptional emptyWords="not known, or miscible" />}
          <TextField name="data.sheetSource" label="Source of the properties" isOptional className="sm:col-span-2 lg:col-span-3" />
        </FieldGrid>
      </Section>
      <Section title="Loss in the water" note="shown beside the conservative forecast, never instead of it unasked">
        <LossFields />
      </Section>
      <Section title="Hazards to people">
        <FieldGrid>
          <LongTextField name="data.hazards" label="Hazards" hint="What crews must know before they go near: by skin, by vapour, with what it reacts" isOptional showsEmpty />
        </FieldGrid>
      </Section>
      <Section title="Published values" note="each with its source">
        <RowsEditor
          name="data.publishedValues" caption="Published values" rowWord="value" addLabel="Add value" most={60}
          empty="No published values. Edit the entry to add the ones you are asked about, each with its source."
          newRow={() => ({ use: 'drinking', value: null, unit, basis: '', averaging: '', source: '' })}
          columns={[
            { key: 'use', label: 'For', kind: 'choice', choices: choicesOf(useWords, Object.keys(useWords)), width: 'min-w-36', isWide: true },
            { key: 'value', label: 'Value', kind: 'number', width: 'min-w-28' },
            { key: 'unit', label: 'Unit', kind: 'choice', choices: unitChoices, width: 'min-w-36' },
            { key: 'basis', label: 'Basis', kind: 'text', width: 'min-w-28' },
            { key: 'averaging', label: 'Averaging', kind: 'text', width: 'min-w-28' },
            { key: 'source', label: 'Source', kind: 'text', width: 'min-w-56', isWide: true },
          ]}
        />
      </Section>
      <NotesSection />
    </>
  );
}

function LossFields() {
  const { setValue } = useFormContext();
  const kind = useValue<Loss['kind']>('data.loss.kind');
  return (
    <FieldGrid>
      <SelectField name="data.loss.kind" label="Loss" choices={losses} onChosen={(next) => setValue('data.loss', emptyLoss[next ?? 'none'], { shouldDirty: true })} />
      {kind === 'first-order' && <RateField name="data.loss.ratePerS" label="Half-life" />}
      {kind === 'day-night' && (
        <>
          <RateField name="data.loss.dayRatePerS" label="Half-life by day" />
          <RateField name="data.loss.nightRatePerS" label="Half-life by night" />
          <NumberField name="data.loss.sunriseHour" label="Sunrise" unit="h" hint="Local time." range="0 to 24." />
          <NumberField name="data.loss.sunsetHour" label="Sunset" unit="h" hint="Local time." range="0 to 24." />
        </>
      )}
      {kind !== 'none' && <TextField name="data.loss.source" label="Source of the rate" isOptional className="sm:col-span-2" />}
    </FieldGrid>
  );
}

const LN10 = Math.LN10;

/** A rate typed as a half-life in hours; the rate itself and T90 are said beside it. */
function RateField({ name, label }: { name: string; label: string }) {
  const { setValue, formState } = useFormContext();
  const rate = useValue<number | null>(name);
  const hours = rate !== null && rate > 0 ? Number((rateFromHalfLife(1) / rate / 3_600).toPrecision(6)) : null;
  const words = rate !== null && rate > 0 ? `${formatNumber(rate, 3)} 1/s; 90 % gone in ${formatDuration(LN10 / rate)}.` : 'In hours, above 0.';
  const isWriting = useIsWriting();
  if (!isWriting) return <Reading label={label} unit={hours === null ? undefined : 'h'}>{hours === null ? '' : `${formatNumber(hours, 3)}`}</Reading>;
  const error = (formState.errors as { data?: { loss?: Record<string, { message?: string }> } }).data?.loss?.[name.split('.').at(-1)!]?.message;
  return (
    <Field label={label} unit="h" hint={words} error={error}>
      <NumberInput name={name} value={hours} unit="h" onChange={(next) => setValue(name, next !== null && next > 0 ? rateFromHalfLife(next * 3_600) : null, { shouldDirty: true })} />
    </Field>
  );
}
