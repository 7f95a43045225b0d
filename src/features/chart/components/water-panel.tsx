import { isRiver } from '../../../../shared/assemble';
import { instantMs } from '../../../../shared/civil';
import { formatClock, formatDuration, formatNumber } from '../../../../shared/format';
import { Field } from '../../../components/field';
import { SelectInput, TextInput } from '../../../components/inputs';
import { NumberInput } from '../../../components/number-input';
import { useChart, useErrorAt } from '../hooks/chart-context';
import type { Draft, DraftRiver } from '../model/draft';
import { chooseCurrent, chooseFlow, waterItem } from '../model/draft-actions';
import { automaticHorizonS } from '../model/horizon';
import { unitScales } from '../model/unit-scales';
import { CurrentFields } from './current-fields';
import { horizonChoices } from './timing-fields';
import { UnitField } from './unit-fields';

/** The water the release is in, and how it moves. */
export function WaterPanel() {
  const { draft, isReadOnly } = useChart();
  if (!draft.water) return <p className="text-ink2">The water follows from the place of the release.</p>;
  return (
    <fieldset disabled={isReadOnly} className="contents">
      {draft.water.kind === 'river' ? <RiverFields river={draft.water} /> : <OpenFields />}
      <HorizonField />
    </fieldset>
  );
}

/** "Q50" in words: the share of the time the flow is exceeded. */
export function flowWords(river: DraftRiver, flowName: string): string {
  const row = river.reaches.flatMap((reach) => reach.hydraulics).find((one) => one.flowName === flowName);
  return row?.exceededPercent === null || row === undefined ? flowName : `${flowName}, exceeded ${formatNumber(row.exceededPercent)} % of the time`;
}

export function waterSummary(draft: Draft): string {
  const { water } = draft;
  if (!water) return 'follows from the place';
  if (water.kind === 'open') return [water.name, draft.currentName].filter(Boolean).join(', ');
  return `${water.name}, ${water.flow.discharges.length > 0 ? 'typed discharge' : water.flow.name}`;
}

function RiverFields({ river }: { river: DraftRiver }) {
  const { draft, change } = useChart();
  const flowNames = [...new Set(river.reaches.flatMap((reach) => reach.hydraulics.map((row) => row.flowName)))];
  const flowError = useErrorAt('water.flow.name');
  const dischargeError = useErrorAt('water.flow.discharges');
  const reachId = river.flow.discharges[0]?.reachId ?? draft.releases[0]?.channel?.reachId ?? river.reaches[0]!.id;
  const reach = river.reaches.find((one) => one.id === reachId) ?? river.reaches[0]!;
  const row = reach.hydraulics.find((one) => one.flowName === river.flow.name);
  const setDischarge = (dischargeM3s: number | null) =>
    change((now) => (now.water?.kind === 'river' ? { ...now, water: { ...now.water, flow: { ...now.water.flow, discharges: dischargeM3s === null ? [] : [{ reachId: reach.id, dischargeM3s }] } } } : now), 'discharge');
  const setFlow = (patch: Partial<DraftRiver['flow']>) => change((now) => (now.water?.kind === 'river' ? { ...now, water: { ...now.water, flow: { ...now.water.flow, ...patch } } } : now), 'flow');
  return (
    <>
      <Field label="Flow" error={flowError} hint={row ? `In ${reach.name}: ${formatNumber(row.dischargeM3s)} m³/s, ${formatNumber(row.widthM)} m wide, ${formatNumber(row.depthM)} m deep, ${formatNumber(row.velocityMps)} m/s` : undefined}>
        <SelectInput value={river.flow.name} onChange={(event) => change((now) => chooseFlow(now, event.target.value))}>
          {flowNames.map((name) => (
            <option key={name} value={name}>
              {flowWords(river, name)}
            </option>
          ))}
        </SelectInput>
      </Field>
      <UnitField
        label={`Or discharge in ${reach.name}`}
        isOptional
        scales={unitScales.discharge}
        value={river.flow.discharges[0]?.dischargeM3s ?? null}
        error={dischargeError}
        hint="Width, depth and velocity follow from the named flows"
        onChange={setDischarge}
      />
      {river.flow.discharges.length > 0 && (
        <Field label="Discharge read where and when" isOptional>
          <TextInput value={river.flow.source} placeholder="gauge GA, 06:20" onChange={(event) => setFlow({ source: event.target.value })} />
        </Field>
      )}
      <Field label="Water temperature" unit="°C" isOptional>
        <NumberInput value={river.temperatureC} min={-2} max={60} onChange={(temperatureC) => change((now) => (now.water?.kind === 'river' ? { ...now, water: { ...now.water, temperatureC } } : now), 'temperature')} />
      </Field>
    </>
  );
}

function OpenFields() {
  const { draft, change, registers } = useChart();
  const item = waterItem(draft, registers);
  const states = item && !isRiver(item.data) ? item.data.currents : [];
  return (
    <>
      {states.length > 0 && (
        <Field label="Current" hint="Each part can be changed below">
          <SelectInput value={draft.currentName} onChange={(event) => change((now) => chooseCurrent(now, event.target.value, registers))}>
            {!states.some((state) => state.name === draft.currentName) && <option value={draft.currentName}>as typed</option>}
            {states.map((state) => (
              <option key={state.name}>{state.name}</option>
            ))}
          </SelectInput>
        </Field>
      )}
      <CurrentFields />
    </>
  );
}

function HorizonField() {
  const { draft, change, offset } = useChart();
  const automatic = automaticHorizonS(draft);
  const shown = draft.horizonS ?? automatic;
  const choices = draft.horizonS !== null && !horizonChoices.includes(draft.horizonS) ? [draft.horizonS, ...horizonChoices] : horizonChoices;
  const startMs = instantMs(draft.startAt);
  return (
    <Field label="Estimate reaches" error={useErrorAt('horizonS')} hint={Number.isNaN(startMs) ? undefined : `until ${formatClock(startMs + shown * 1_000, offset)}`}>
      <SelectInput value={draft.horizonS ?? ''} onChange={(event) => change((now) => ({ ...now, horizonS: event.target.value === '' ? null : Number(event.target.value) }))}>
        <option value="">{`as far as the last receptor needs: ${formatDuration(automatic)}`}</option>
        {choices.map((s) => (
          <option key={s} value={s}>
            {formatDuration(s)} after T0
          </option>
        ))}
      </SelectInput>
    </Field>
  );
}
