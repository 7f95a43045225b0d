import { useState } from 'react';
import { instantMs, isoWithOffset } from '../../../../shared/civil';
import { formatAmount, formatDuration } from '../../../../shared/format';
import { Field } from '../../../components/field';
import { SelectInput, TextArea } from '../../../components/inputs';
import { InstantInput } from '../../../components/instant-input';
import { useChart, useErrorAt } from '../hooks/chart-context';
import type { DraftRelease, DraftTiming } from '../model/draft';
import { changeRelease } from '../model/draft-actions';
import { massUnder, readRateTable, writeRateTable, type RateUnit } from '../model/rate-table';
import { unitScales } from '../model/unit-scales';
import { UnitField } from './unit-fields';

const HOUR_S = 3_600;

/** When and how long: at once, steadily over a time, or a table of rates. */
export function TimingFields({ release, index }: { release: DraftRelease; index: number }) {
  const { change } = useChart();
  const { timing } = release;
  const path = `releases.${index}.timing`;
  const set = (next: DraftTiming, field = '') => change((now) => changeRelease(now, release.id, (one) => ({ ...one, timing: next })), field && `${release.id}.${field}`);
  const durationError = useErrorAt(`${path}.durationS`);
  const timingError = useErrorAt(path);
  return (
    <>
      <Field label="It ran out" error={durationError ? undefined : timingError}>
        <SelectInput value={timing.kind} onChange={(event) => set(changeKind(timing, event.target.value as DraftTiming['kind']))}>
          <option value="instantaneous">all at once</option>
          <option value="steady">steadily over a time</option>
          <option value="table">by a table of rates</option>
        </SelectInput>
      </Field>
      {timing.kind === 'steady' && (
        <UnitField label="Duration" scales={unitScales.duration} value={timing.durationS} error={durationError} onChange={(durationS) => set({ ...timing, durationS }, 'duration')} />
      )}
      {timing.kind === 'table' && <RateTable timing={timing} onChange={(rows) => set({ kind: 'table', rows }, 'rates')} />}
      {index > 0 && timing.kind !== 'table' && <StartField timing={timing} onChange={(next) => set(next, 'start')} />}
    </>
  );
}

function changeKind(timing: DraftTiming, kind: DraftTiming['kind']): DraftTiming {
  const startS = timing.kind === 'instantaneous' ? timing.atS : timing.kind === 'steady' ? timing.startS : 0;
  if (kind === 'instantaneous') return { kind, atS: startS };
  if (kind === 'steady') return { kind, startS, durationS: timing.kind === 'steady' ? timing.durationS : null };
  return { kind, rows: [] };
}

/** A later release begins at its own clock time; the first one begins at T0. */
function StartField({ timing, onChange }: { timing: Exclude<DraftTiming, { kind: 'table' }>; onChange: (next: DraftTiming) => void }) {
  const { draft, offset } = useChart();
  const startMs = instantMs(draft.startAt);
  const startS = timing.kind === 'instantaneous' ? timing.atS : timing.startS;
  const set = (iso: string | null) => {
    const s = iso === null ? null : (instantMs(iso) - startMs) / 1_000;
    onChange(timing.kind === 'instantaneous' ? { ...timing, atS: s } : { ...timing, startS: s });
  };
  return (
    <Field label="Begins" isGroup hint={startS === null ? undefined : `${formatDuration(startS)} after T0`}>
      <InstantInput value={startS === null || Number.isNaN(startMs) ? null : isoWithOffset(startMs + startS * 1_000, offset)} offset={offset} onChange={set} />
    </Field>
  );
}

function RateTable({ timing, onChange }: { timing: Extract<DraftTiming, { kind: 'table' }>; onChange: (rows: { atS: number; rate: number }[]) => void }) {
  const { draft } = useChart();
  const [unit, setUnit] = useState<RateUnit>('kg/h');
  const [text, setText] = useState(() => writeRateTable(timing.rows, 'kg/h'));
  const read = text.trim() === '' ? null : readRateTable(text, unit);
  const send = (nextText: string, nextUnit: RateUnit) => {
    const next = readRateTable(nextText, nextUnit);
    if ('rows' in next) onChange(next.rows);
  };
  const rows = read && 'rows' in read ? read.rows : null;
  const last = rows?.[rows.length - 1];
  return (
    <>
      <Field label="Rates are in">
        <SelectInput
          value={unit}
          onChange={(event) => {
            const next = event.target.value as RateUnit;
            setUnit(next);
            send(text, next);
          }}
        >
          <option>kg/h</option>
          <option>kg/min</option>
          <option>kg/s</option>
        </SelectInput>
      </Field>
      <Field
        label="Time after T0 and rate, two columns"
        error={read && 'error' in read ? read.error : undefined}
        hint={
          rows && last
            ? `${rows.length} rows over ${formatDuration(last.atS - (rows[0]?.atS ?? 0))}; the rates add up to ${formatAmount(massUnder(rows), draft.substance?.measure ?? 'mass').text} kg, the amount below is spread the same way`
            : 'Paste from a sheet: h:mm or minutes, then the rate'
        }
      >
        <TextArea
          rows={6}
          spellCheck={false}
          placeholder={'0:00\t120\n0:30\t80\n2:00\t0'}
          value={text}
          onChange={(event) => {
            setText(event.target.value);
            send(event.target.value, unit);
          }}
        />
      </Field>
    </>
  );
}

export const horizonChoices = [6, 12, 24, 36, 48, 72, 96, 120, 168, 240].map((h) => h * HOUR_S);
