import { useState } from 'react';
import { Field } from '../../../components/field';
import { SelectInput } from '../../../components/inputs';
import { NumberInput } from '../../../components/number-input';
import { RangeInput } from '../../../components/range-input';
import type { DraftRange } from '../model/draft';
import { fromUnit, readableScale, toUnit, type UnitScale } from '../model/unit-scales';

type Shared = { label: string; scales: readonly UnitScale[]; error?: string | undefined; hint?: string | undefined; disabled?: boolean };

function useScale(si: number | null, scales: readonly UnitScale[]) {
  const [unit, setUnit] = useState(() => readableScale(si, scales).unit);
  return { scale: scales.find((one) => one.unit === unit) ?? scales[0]!, setUnit };
}

function UnitSelect({ label, scales, unit, onUnit }: { label: string; scales: readonly UnitScale[]; unit: string; onUnit: (unit: string) => void }) {
  if (scales.length === 1) return null;
  return (
    <SelectInput id="" aria-label={`Unit of ${label.toLowerCase()}`} aria-describedby="" value={unit} onChange={(event) => onUnit(event.target.value)} className="w-auto!">
      {scales.map((one) => (
        <option key={one.unit}>{one.unit}</option>
      ))}
    </SelectInput>
  );
}

/** One figure kept in SI, typed in a unit of choice. Changing the unit rewrites the figure, not the amount. */
export function UnitField({ label, scales, value, onChange, error, hint, disabled = false, isOptional = false }: Shared & { value: number | null; onChange: (si: number | null) => void; isOptional?: boolean }) {
  const { scale, setUnit } = useScale(value, scales);
  return (
    <Field label={label} unit={scale.unit} error={error && value === null ? `Give a number in ${scale.unit}` : error} hint={hint} isOptional={isOptional}>
      <div className="flex gap-2">
        <div className="min-w-0 flex-1">
          <NumberInput disabled={disabled} value={toUnit(value, scale)} onChange={(typed) => onChange(fromUnit(typed, scale))} min={0} />
        </div>
        <UnitSelect label={label} scales={scales} unit={scale.unit} onUnit={setUnit} />
      </div>
    </Field>
  );
}

/** The order of the three is told by the range itself, in the typed unit. */
function rangeError(error: string | undefined, value: DraftRange, unit: string): string | undefined {
  if (error === undefined || /^(Low|High) \(/.test(error)) return undefined;
  return value.likely === null ? `Give the likely figure in ${unit}` : error;
}

/** Low, likely and high, kept in SI. */
export function UnitRangeField({ label, scales, value, onChange, error, hint }: Shared & { value: DraftRange; onChange: (si: DraftRange) => void }) {
  const { scale, setUnit } = useScale(value.likely, scales);
  const map = (range: DraftRange, by: typeof toUnit): DraftRange => ({ low: by(range.low, scale), likely: by(range.likely, scale), high: by(range.high, scale) });
  return (
    <Field label={label} isGroup error={rangeError(error, value, scale.unit)} hint={hint}>
      <div className="flex items-start gap-2">
        <div className="min-w-0 flex-1">
          <RangeInput value={map(value, toUnit)} onChange={(range) => onChange(map(range, fromUnit))} unit={scale.unit} />
        </div>
        <UnitSelect label={label} scales={scales} unit={scale.unit} onUnit={setUnit} />
      </div>
    </Field>
  );
}
