import { useFieldArray, useFormContext } from 'react-hook-form';
import { formatEntered } from '../../../../shared/format';
import type { CurrentPart } from '../../../../shared/schemas/estimate';
import { Button } from '../../../components/button';
import { FieldError } from '../../../components/field';
import { ownMessageAt } from '../model/form-errors';
import { FieldGrid, NumberField, Reading, SelectField, TextField, useValue } from './bound-fields';
import { useIsWriting } from './entry-mode';

type State = { name: string; parts: CurrentPart[] };
const NAME = 'data.currents';

const kinds = [
  { value: 'residual', label: 'Steady current' },
  { value: 'tide', label: 'Tidal stream' },
  { value: 'wind', label: 'Wind drift' },
];
const emptyPart: Record<string, Record<string, unknown>> = {
  residual: { kind: 'residual', speedMps: null, towardDeg: null },
  tide: { kind: 'tide', name: 'M2', majorMps: null, minorMps: 0, floodTowardDeg: null, periodS: 44_712, maxFloodS: null },
  wind: { kind: 'wind', windSpeedMps: null, windFromDeg: null, driftFraction: 0.02, turnDeg: 0 },
};

/** A part of a current in one line. */
function partWords(part: CurrentPart): string {
  if (part.kind === 'residual') return `Steady ${formatEntered(part.speedMps)} m/s toward ${formatEntered(part.towardDeg)}°`;
  if (part.kind === 'tide') return `Tidal stream ${part.name}: ${formatEntered(part.majorMps)} m/s at most, flood toward ${formatEntered(part.floodTowardDeg)}°, period ${formatEntered(Math.round(part.periodS / 36) / 100)} h, strongest flood ${formatEntered(Math.round(part.maxFloodS / 36) / 100)} h after T0`;
  if (part.kind === 'wind') return `Wind ${formatEntered(part.windSpeedMps)} m/s from ${formatEntered(part.windFromDeg)}°, of which ${formatEntered(Math.round(part.driftFraction * 1e4) / 100)} % moves the water`;
  return `Series of ${part.rows.length} rows`;
}

export function CurrentFields() {
  return useIsWriting() ? <WritingCurrents /> : <ReadingCurrents />;
}

function ReadingCurrents() {
  const states = useValue<State[] | undefined>(NAME) ?? [];
  if (states.length === 0) return <p className="py-4 text-ink2">No named states: the water is taken as still unless a scenario says otherwise.</p>;
  return (
    <dl className="grid grid-cols-1 gap-x-6 gap-y-4 pt-4 sm:grid-cols-2">
      {states.map((state, i) => (
        <Reading key={`${i}-${state.name}`} label={state.name}>{state.parts.length === 0 ? 'No current' : state.parts.map(partWords).join('\n')}</Reading>
      ))}
    </dl>
  );
}

function WritingCurrents() {
  const { control, formState } = useFormContext();
  const { fields, append, remove } = useFieldArray({ control, name: NAME, keyName: 'rowKey' });
  const own = ownMessageAt(formState.errors, NAME);
  return (
    <>
      {own && <FieldError>{own}</FieldError>}
      {fields.map((field, i) => <WritingState key={field.rowKey} name={`${NAME}.${i}`} n={i + 1} onRemove={() => remove(i)} />)}
      {fields.length < 20 && <Button kind="quiet" icon="add" className="mt-3" onClick={() => append({ name: '', parts: [] })}>Add state</Button>}
    </>
  );
}

function WritingState({ name, n, onRemove }: { name: string; n: number; onRemove: () => void }) {
  const { control } = useFormContext();
  const { fields, append, remove } = useFieldArray({ control, name: `${name}.parts`, keyName: 'rowKey' });
  return (
    <div role="group" aria-label={`State ${n}`} className="border-b border-rule pb-4">
      <div className="flex items-end gap-3 pt-4">
        <TextField name={`${name}.name`} label={`State ${n}${n === 1 ? ', the usual one' : ''}`} className="flex-1 max-w-md" />
        <Button kind="quiet" icon="close" onClick={onRemove}>Remove state {n}</Button>
      </div>
      {fields.map((field, i) => (
        <div key={field.rowKey} className="mt-3 flex items-start gap-3 border-l border-rule pl-4">
          <div className="min-w-0 flex-1"><PartFields name={`${name}.parts.${i}`} n={i + 1} /></div>
          <Button kind="quiet" icon="close" aria-label={`Remove part ${i + 1} of state ${n}`} className="mt-9" onClick={() => remove(i)} />
        </div>
      ))}
      {fields.length < 40 && <Button kind="quiet" icon="add" className="mt-2" onClick={() => append(emptyPart.residual)}>Add a current to this state</Button>}
    </div>
  );
}

function PartFields({ name, n }: { name: string; n: number }) {
  const { setValue } = useFormContext();
  const part = useValue<CurrentPart>(name);
  if (part.kind === 'series') return <p className="pt-6">{partWords(part)}</p>;
  return (
    <FieldGrid>
      <SelectField name={`${name}.kind`} label={`Part ${n}`} choices={kinds} onChosen={(next) => setValue(name, emptyPart[next ?? 'residual'], { shouldDirty: true })} />
      {part.kind === 'residual' && (
        <>
          <NumberField name={`${name}.speedMps`} label="Speed" unit="m/s" range="0 to 10." />
          <NumberField name={`${name}.towardDeg`} label="Toward" unit="° true" range="0 to 360." />
        </>
      )}
      {part.kind === 'tide' && (
        <>
          <TextField name={`${name}.name`} label="Constituent" />
          <NumberField name={`${name}.majorMps`} label="Strongest" unit="m/s" range="0 to 10." />
          <NumberField name={`${name}.minorMps`} label="Minor axis" unit="m/s" hint="Positive turns anticlockwise." range="-10 to 10." />
          <NumberField name={`${name}.floodTowardDeg`} label="Flood toward" unit="° true" range="0 to 360." />
          <NumberField name={`${name}.periodS`} label="Period" unit="s" hint="M2: 44,712 s, which is 12.42 h." />
          <NumberField name={`${name}.maxFloodS`} label="Strongest flood after T0" unit="s" hint="Negative: before T0." />
        </>
      )}
      {part.kind === 'wind' && (
        <>
          <NumberField name={`${name}.windSpeedMps`} label="Wind speed" unit="m/s" range="0 to 80." />
          <NumberField name={`${name}.windFromDeg`} label="Wind from" unit="° true" range="0 to 360." />
          <NumberField name={`${name}.driftFraction`} label="Drift per wind speed" unit="m/s per m/s" hint="0.01 to 0.03 is usual (common practice, no source)." range="0 to 0.1." />
          <NumberField name={`${name}.turnDeg`} label="Turned clockwise by" unit="°" range="-90 to 90." />
        </>
      )}
    </FieldGrid>
  );
}
