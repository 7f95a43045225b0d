import { readFileSync } from 'node:fs';
import { estimateDocumentSchema, type EstimateDocument, type EstimateDocumentInput } from '../../shared/schemas/estimate';
import { channel } from './network-helpers';

type RiverInput = Extract<EstimateDocumentInput['water'], { kind: 'river' }>;
type Stored = EstimateDocumentInput & { water: RiverInput };

/** The invented river Ollemar with its two side waters, as a stored document describes it. */
const stored = (): Stored => JSON.parse(readFileSync(new URL('../fixtures/documents/s01-river.json', import.meta.url), 'utf8')) as Stored;

const receptorAt = (id: string, reachId: string, km: number, bank: 'left' | 'right' | 'mid', value?: number) => ({
  id,
  name: id,
  kind: 'intake' as const,
  position: [0, 0] as [number, number],
  channel: channel(reachId, km, bank),
  actionValues: value === undefined ? [] : [{ value }],
});

/** Fire-water at km 8.0 of the Evarrow, 2.5 kg over six hours; the dam at one discharge, or changing with time. */
export function fireWater(dam: number | { atS: number; dischargeM3s: number }[]): EstimateDocument {
  const doc = stored();
  const base = typeof dam === 'number' ? dam : dam[0]!.dischargeM3s;
  return estimateDocumentSchema.parse({
    ...doc,
    startAt: '2031-11-03T22:15:00-08:00',
    horizonS: 40 * 3_600,
    substance: { name: 'Chlorpyrifos' },
    water: {
      ...doc.water,
      flow: {
        name: 'Q50',
        discharges: [{ reachId: 'evarrow', dischargeM3s: base }, { reachId: 'ollemar-2', dischargeM3s: 9 + base }, { reachId: 'ollemar-3', dischargeM3s: 11.5 + base }],
        ...(typeof dam === 'number' ? {} : { series: [{ reachId: 'evarrow', rows: dam }] }),
      },
    },
    releases: [{ id: 'store', name: 'Orchard store', position: [0, 0], channel: channel('evarrow', 8, 'right'), timing: { kind: 'steady', durationS: 6 * 3_600 }, amount: { how: 'mass', massKg: { likely: 2.5 } } }],
    receptors: [receptorAt('mouth', 'evarrow', 0, 'mid'), receptorAt('int-2', 'ollemar-3', 20, 'right', 1e-7)],
  } satisfies EstimateDocumentInput);
}

/** Chromium at km 45.0 of the Ollemar, right bank, 450 kg in 45 minutes, at low flow. */
export function platingBath(): EstimateDocument {
  const doc = stored();
  return estimateDocumentSchema.parse({
    ...doc,
    horizonS: 40 * 3_600,
    substance: { name: 'Chromium VI' },
    water: { ...doc.water, flow: { name: 'Q95' } },
    releases: [{ id: 'bath', name: 'Plating bath', position: [0, 0], channel: channel('ollemar-1', 45, 'right'), timing: { kind: 'steady', durationS: 2_700 }, amount: { how: 'mass', massKg: { likely: 450 } } }],
    receptors: [receptorAt('same', 'ollemar-1', 44.2, 'right'), receptorAt('far', 'ollemar-1', 44.2, 'left'), receptorAt('int-1', 'ollemar-1', 42, 'right', 1.6e-5), receptorAt('int-2', 'ollemar-3', 20, 'right', 2.5e-5)],
  } satisfies EstimateDocumentInput);
}

/** Hypochlorite at km 4.8 of the Quillock, 144 kg in two hours, half gone in half an hour. */
export function hypochlorite(): EstimateDocument {
  const doc = stored();
  return estimateDocumentSchema.parse({
    ...doc,
    horizonS: 12 * 3_600,
    substance: { name: 'Hypochlorite', loss: { kind: 'first-order', ratePerS: Math.LN2 / 1_800 }, applyLoss: true },
    water: { ...doc.water, flow: { name: 'Q95' } },
    releases: [{ id: 'leak', name: 'Creamery', position: [0, 0], channel: channel('quillock', 4.8, 'left'), timing: { kind: 'steady', durationS: 7_200 }, amount: { how: 'mass', massKg: { likely: 144 } } }],
    receptors: [receptorAt('hat-1', 'quillock', 3, 'left', 1.9e-5), receptorAt('mouth', 'quillock', 0, 'mid'), receptorAt('below', 'ollemar-3', 28.6, 'mid')],
  } satisfies EstimateDocumentInput);
}

/**
 * The tidal Ollemar, widths and depths of its stations, springs: amplitudes 0.45 m/s at km 12, 0.75 at km 7, 0.90 at the
 * bar, none at the weir; 25 kg of MCPA at km 9 at high-water slack.
 */
export function bargeHatch(horizonS = 30 * 3_600): EstimateDocument {
  const periodS = 12.42 * 3_600;
  const tide = (amplitudeMps: number) => ({ amplitudeMps, periodS, maxEbbS: periodS / 4 });
  const reach = (id: string, top: number, bottom: number, widthM: number, depthM: number, amplitudeMps: number, down: string | null) => ({
    id,
    name: id,
    centreline: [[-117.15 - 0.01 * (14 - top), -44.5, top], [-117.15 - 0.01 * (14 - bottom), -44.5, bottom]] as [number, number, number][],
    downstreamReachId: down,
    hydraulics: [{ flowName: 'Q50', dischargeM3s: 16.5, widthM, depthM, velocityMps: 16.5 / (widthM * depthM) }],
    dispersionM2s: 80,
    transverseM2s: 0.5,
    tide: tide(amplitudeMps),
    tidal: true,
  });
  const upper = { ...reach('upper', 14, 12, 105, 2.5, 0.45, 'middle'), structure: { kind: 'weir' as const, volumeM3: 1_000 } };
  return estimateDocumentSchema.parse({
    format: 'downreach-estimate/1',
    startAt: '2031-05-12T17:35:00-08:00',
    horizonS,
    substance: { name: 'MCPA' },
    water: { kind: 'river', name: 'Ollemar estuary', reaches: [upper, reach('middle', 12, 7, 400, 4, 0.75, 'lower'), reach('lower', 7, 0, 850, 5.7, 0.9, null)], flow: { name: 'Q50' } },
    releases: [{ id: 'barge', name: 'Barge', position: [0, 0], channel: channel('middle', 9), timing: { kind: 'instantaneous' }, amount: { how: 'mass', massKg: { likely: 25 } } }],
    receptors: [receptorAt('eco-1', 'middle', 7.001, 'mid', 5e-6), receptorAt('up', 'middle', 11, 'mid')],
  } satisfies EstimateDocumentInput);
}
