import { formatNumber } from '../../../../shared/format';
import type { Reach } from '../../../../shared/schemas/estimate';
import { Field } from '../../../components/field';
import { CheckInput, SelectInput, TextInput } from '../../../components/inputs';
import { NumberInput } from '../../../components/number-input';
import { useChart, useErrorAt } from '../hooks/chart-context';
import type { Draft, DraftOpenWater, DraftRiver } from '../model/draft';
import { shoreNear } from '../model/straight-shore';

export function coefficientSummary(draft: Draft): string {
  const { water } = draft;
  if (!water) return '';
  const isCalibrated = water.kind === 'open' ? water.calibrated : water.reaches.every((reach) => reach.calibrated);
  return isCalibrated ? 'calibrated' : 'not calibrated';
}

/** What makes the cloud spread; every default says where it comes from. */
export function CoefficientsPanel() {
  const { draft, isReadOnly } = useChart();
  if (!draft.water) return <p className="text-ink2">The coefficients follow from the water.</p>;
  return (
    <fieldset disabled={isReadOnly} className="contents">
      {draft.water.kind === 'river' ? <RiverCoefficients river={draft.water} /> : <OpenCoefficients water={draft.water} />}
    </fieldset>
  );
}

function RiverCoefficients({ river }: { river: DraftRiver }) {
  const { draft, change } = useChart();
  const below = reachesBelow(river, draft.releases.flatMap((release) => release.channel?.reachId ?? []));
  const set = (id: string, patch: Partial<Reach>) =>
    change((now) => (now.water?.kind === 'river' ? { ...now, water: { ...now.water, reaches: now.water.reaches.map((reach) => (reach.id === id ? { ...reach, ...patch } : reach)) } } : now), `reach.${id}`);
  return (
    <>
      <p className="text-note text-ink2">Left empty, along-stream dispersion is 0.011 U²W²/(H u*) and transverse mixing 0.6 H u* (Fischer et al. 1979), from each reach&rsquo;s figures at this flow. The working shows the values.</p>
      {below.map((reach) => (
        <section key={reach.id} aria-label={reach.name} className="grid grid-cols-2 gap-3 border-t border-rule pt-3">
          <h3 className="col-span-2 font-semibold">{reach.name}</h3>
          <Field label="Along" unit="m²/s" isOptional>
            <NumberInput value={reach.dispersionM2s} min={0} onChange={(dispersionM2s) => set(reach.id, { dispersionM2s })} />
          </Field>
          <Field label="Across" unit="m²/s" isOptional>
            <NumberInput value={reach.transverseM2s} min={0} onChange={(transverseM2s) => set(reach.id, { transverseM2s })} />
          </Field>
          {(reach.dispersionM2s !== null || reach.transverseM2s !== null) && (
            <Field label="Where from" className="col-span-2" isOptional>
              <TextInput value={reach.coefficientNote} placeholder="dye test of 2029, author" onChange={(event) => set(reach.id, { coefficientNote: event.target.value })} />
            </Field>
          )}
        </section>
      ))}
    </>
  );
}

/** Reaches that the releases pass, in that order. */
function reachesBelow(river: DraftRiver, from: readonly string[]): Reach[] {
  const byId = new Map(river.reaches.map((reach) => [reach.id, reach] as const));
  const passed = new Map<string, Reach>();
  for (const id of from) for (let reach = byId.get(id); reach && !passed.has(reach.id); reach = byId.get(reach.downstreamReachId ?? '')) passed.set(reach.id, reach);
  return [...passed.values()];
}

const emptyMixing: Record<DraftOpenWater['mixing']['kind'], DraftOpenWater['mixing']> = {
  okubo: { kind: 'okubo', varianceFactor: 1 },
  growing: { kind: 'growing', law: 'lake', coefficient: null, mostM2s: null },
  constant: { kind: 'constant', alongM2s: null, acrossM2s: null, turnsWithCurrent: true, axisTowardDeg: 0 },
};

function OpenCoefficients({ water }: { water: DraftOpenWater }) {
  const { draft, change } = useChart();
  const set = (patch: Partial<DraftOpenWater>, key = '') => change((now) => (now.water?.kind === 'open' ? { ...now, water: { ...now.water, ...patch } } : now), key);
  const { mixing } = water;
  const depthError = useErrorAt('water.mixingDepthM');
  const waterDepthError = useErrorAt('water.depthM');
  const alongError = useErrorAt('water.mixing.alongM2s');
  const acrossError = useErrorAt('water.mixing.acrossM2s');
  const factorError = useErrorAt('water.mixing.varianceFactor');
  const position = draft.releases[0]?.position;
  return (
    <>
      <div className="grid grid-cols-2 gap-3">
        <Field label="Mixing depth" unit="m" error={depthError} hint="Over which the substance is taken as mixed">
          <NumberInput value={water.mixingDepthM} min={0} step={0.5} onChange={(mixingDepthM) => set({ mixingDepthM }, 'mixingDepth')} />
        </Field>
        <Field label="Water depth" unit="m" error={waterDepthError}>
          <NumberInput value={water.depthM} min={0} step={0.5} onChange={(depthM) => set({ depthM }, 'depth')} />
        </Field>
      </div>
      <Field label="Spreading">
        <SelectInput
          value={mixing.kind}
          onChange={(event) => set({ mixing: emptyMixing[event.target.value as keyof typeof emptyMixing] })}
        >
          <option value="okubo">grows with the age of the cloud (Okubo 1971)</option>
          <option value="growing">grows with the size of the cloud</option>
          <option value="constant">constant along and across</option>
        </SelectInput>
      </Field>
      {mixing.kind === 'growing' && (
        <>
          <Field label="Law of growth">
            <SelectInput value={mixing.law} onChange={(event) => set({ mixing: { ...mixing, law: event.target.value as typeof mixing.law, coefficient: null } })}>
              <option value="four-thirds">size to the power 4/3, open coast (Richardson 1926)</option>
              <option value="okubo">size to the power 1.15, sea (Okubo 1971)</option>
              <option value="lake">size to the power 1.1, lakes (Lawrence et al. 1995)</option>
            </SelectInput>
          </Field>
          <Field label="At most" unit="m²/s" isOptional hint="The shores of a harbour or a small lake stop the growth">
            <NumberInput value={mixing.mostM2s} min={0} onChange={(mostM2s) => set({ mixing: { ...mixing, mostM2s } }, 'most')} />
          </Field>
        </>
      )}
      {mixing.kind === 'okubo' && (
        <Field label="Times the variance of the relation" error={factorError} hint="1 is the published mean; sheltered water spreads less">
          <NumberInput value={mixing.varianceFactor} min={0} step={0.1} onChange={(varianceFactor) => set({ mixing: { ...mixing, varianceFactor } }, 'factor')} />
        </Field>
      )}
      {mixing.kind === 'constant' && (
        <>
          <div className="grid grid-cols-2 gap-3">
            <Field label="Along" unit="m²/s" error={alongError}>
              <NumberInput value={mixing.alongM2s} min={0} onChange={(alongM2s) => set({ mixing: { ...mixing, alongM2s } }, 'along')} />
            </Field>
            <Field label="Across" unit="m²/s" error={acrossError}>
              <NumberInput value={mixing.acrossM2s} min={0} onChange={(acrossM2s) => set({ mixing: { ...mixing, acrossM2s } }, 'across')} />
            </Field>
          </div>
          <CheckInput label="Along turns with the current" checked={mixing.turnsWithCurrent} onChange={(event) => set({ mixing: { ...mixing, turnsWithCurrent: event.target.checked } })} />
        </>
      )}
      <CheckInput
        label="Take the nearest shore as a straight wall"
        hint="The cloud is mirrored at it (method of images). Leave it off where the shore is far or crooked"
        checked={water.straightShore !== null}
        onChange={(event) => set({ straightShore: event.target.checked && position ? shoreNear(position, water.area) : null })}
      />
      <Field label="Where the coefficients come from" isOptional hint={`Depth ${formatNumber(water.depthM ?? 0)} m and spreading are the register's unless changed`}>
        <TextInput value={water.coefficientNote} onChange={(event) => set({ coefficientNote: event.target.value }, 'note')} />
      </Field>
    </>
  );
}
