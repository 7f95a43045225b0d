import { Button } from '../../../components/button';
import { Field } from '../../../components/field';
import { SelectInput } from '../../../components/inputs';
import { NumberInput } from '../../../components/number-input';
import { useChart, useErrorAt } from '../hooks/chart-context';
import type { DraftCurrentPart, DraftOpenWater } from '../model/draft';
import { unitScales } from '../model/unit-scales';
import { UnitField } from './unit-fields';

/** Period of the principal lunar tide, s. */
const M2_S = 12.4206 * 3_600;

const kinds: Record<DraftCurrentPart['kind'], { words: string; fresh: () => DraftCurrentPart }> = {
  residual: { words: 'Residual current', fresh: () => ({ kind: 'residual', speedMps: null, towardDeg: null }) },
  tide: { words: 'Tide', fresh: () => ({ kind: 'tide', name: 'M2', majorMps: null, minorMps: 0, floodTowardDeg: null, periodS: M2_S, maxFloodS: 0 }) },
  // Common practice, no source: surface water drifts at 2 to 4 % of the wind.
  wind: { words: 'Wind drift', fresh: () => ({ kind: 'wind', windSpeedMps: null, windFromDeg: null, driftFraction: 0.02, turnDeg: 0 }) },
  series: { words: 'Series of currents', fresh: () => ({ kind: 'series', rows: [] }) },
};
const addable = ['residual', 'tide', 'wind'] as const;

/** The parts of the current, which add up. */
export function CurrentFields() {
  const { draft, change } = useChart();
  if (draft.water?.kind !== 'open') return null;
  const { current } = draft.water;
  const setAll = (next: DraftCurrentPart[], key = '') =>
    change((now) => (now.water?.kind === 'open' ? { ...now, currentName: '', water: { ...now.water, current: next } as DraftOpenWater } : now), key);
  return (
    <>
      {current.map((part, i) => (
        <section key={i} aria-label={kinds[part.kind].words} className="flex flex-col gap-3 border-t border-rule pt-3">
          <div className="flex items-center justify-between">
            <h3 className="font-semibold">{kinds[part.kind].words}</h3>
            <Button kind="quiet" icon="close" aria-label={`Remove ${kinds[part.kind].words.toLowerCase()}`} onClick={() => setAll(current.filter((_, at) => at !== i))} />
          </div>
          <PartFields part={part} path={`water.current.${i}`} onChange={(next) => setAll(current.map((one, at) => (at === i ? next : one)), `current.${i}`)} />
        </section>
      ))}
      {current.length === 0 && <p className="text-ink2">No current: the cloud only spreads.</p>}
      <Field label="Add to the current">
        <SelectInput
          value=""
          onChange={(event) => {
            const kind = addable.find((one) => one === event.target.value);
            if (kind) setAll([...current, kinds[kind].fresh()]);
          }}
        >
          <option value="">Choose a part</option>
          {addable.map((kind) => (
            <option key={kind} value={kind}>
              {kinds[kind].words}
            </option>
          ))}
        </SelectInput>
      </Field>
    </>
  );
}

type PartProps<P extends DraftCurrentPart = DraftCurrentPart> = { part: P; path: string; onChange: (next: DraftCurrentPart) => void };

function PartFields({ part, path, onChange }: PartProps) {
  if (part.kind === 'residual') return <ResidualFields part={part} path={path} onChange={onChange} />;
  if (part.kind === 'tide') return <TideFields part={part} path={path} onChange={onChange} />;
  if (part.kind === 'wind') return <WindFields part={part} path={path} onChange={onChange} />;
  return <p className="text-ink2">{part.rows.length} rows of measured or forecast current.</p>;
}

function DirectionField({ label, value, path, onChange }: { label: string; value: number | null; path: string; onChange: (value: number | null) => void }) {
  return (
    <Field label={label} unit="° true" error={useErrorAt(path)}>
      <NumberInput value={value} min={0} max={360} step={5} onChange={onChange} />
    </Field>
  );
}

function ResidualFields({ part, path, onChange }: PartProps<Extract<DraftCurrentPart, { kind: 'residual' }>>) {
  return (
    <div className="grid grid-cols-[1.4fr_1fr] gap-3">
      <UnitField label="Speed" scales={unitScales.speed} value={part.speedMps} error={useErrorAt(`${path}.speedMps`)} onChange={(speedMps) => onChange({ ...part, speedMps })} />
      <DirectionField label="Toward" value={part.towardDeg} path={`${path}.towardDeg`} onChange={(towardDeg) => onChange({ ...part, towardDeg })} />
    </div>
  );
}

function TideFields({ part, path, onChange }: PartProps<Extract<DraftCurrentPart, { kind: 'tide' }>>) {
  return (
    <div className="grid grid-cols-[1.4fr_1fr] gap-3">
      <UnitField label="Largest speed" scales={unitScales.speed} value={part.majorMps} error={useErrorAt(`${path}.majorMps`)} onChange={(majorMps) => onChange({ ...part, majorMps })} />
      <DirectionField label="Flood toward" value={part.floodTowardDeg} path={`${path}.floodTowardDeg`} onChange={(floodTowardDeg) => onChange({ ...part, floodTowardDeg })} />
      <UnitField label="Period" scales={[unitScales.duration[1]]} value={part.periodS} error={useErrorAt(`${path}.periodS`)} onChange={(periodS) => onChange({ ...part, periodS })} />
      <Field label="Largest flood" unit="h after T0" error={useErrorAt(`${path}.maxFloodS`)}>
        <NumberInput value={part.maxFloodS === null ? null : Number((part.maxFloodS / 3_600).toPrecision(8))} step={0.25} onChange={(h) => onChange({ ...part, maxFloodS: h === null ? null : h * 3_600 })} />
      </Field>
    </div>
  );
}

function WindFields({ part, path, onChange }: PartProps<Extract<DraftCurrentPart, { kind: 'wind' }>>) {
  return (
    <div className="grid grid-cols-[1.4fr_1fr] gap-3">
      <UnitField label="Wind" scales={[unitScales.speed[0], unitScales.speed[2]]} value={part.windSpeedMps} error={useErrorAt(`${path}.windSpeedMps`)} onChange={(windSpeedMps) => onChange({ ...part, windSpeedMps })} />
      <DirectionField label="From" value={part.windFromDeg} path={`${path}.windFromDeg`} onChange={(windFromDeg) => onChange({ ...part, windFromDeg })} />
      <Field label="Drift" unit="% of the wind" error={useErrorAt(`${path}.driftFraction`)} hint="2 to 4 % is usual; common practice, no source">
        <NumberInput value={part.driftFraction === null ? null : Number((part.driftFraction * 100).toPrecision(6))} min={0} max={10} step={0.5} onChange={(percent) => onChange({ ...part, driftFraction: percent === null ? null : percent / 100 })} />
      </Field>
      <Field label="Turned clockwise" unit="°" error={useErrorAt(`${path}.turnDeg`)}>
        <NumberInput value={part.turnDeg} min={-90} max={90} step={5} onChange={(turnDeg) => onChange({ ...part, turnDeg })} />
      </Field>
    </div>
  );
}
