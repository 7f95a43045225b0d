import { onReach } from './places';
import { estuary, HOUR_S, receptorsOn, river, scenario, source, substance, TIDE_S, type SeedScenario } from './scenarios-parts';

const USUAL = river({ name: 'Q50' }, 12);
const LOW = river({ name: 'Q95' }, 18);

/** 4 t of ammonia solution in ten minutes, usual flow. */
export const tankerAtBridge = (key: string, name: string, note: string): SeedScenario =>
  scenario(key, name, note, {
    startAt: '2031-05-12T06:40:00-08:00', horizonS: 36 * HOUR_S, frameCount: 73,
    substance: substance('ammonia-solution'),
    water: USUAL,
    releases: [
      {
        id: 'release-1', ...source('v2-bridge'), timing: { kind: 'steady', startS: 0, durationS: 600 },
        amount: { how: 'mass', massKg: { low: 2_000, likely: 4_000, high: 8_000 }, activeFraction: 0.2056 },
        evidence: 'Driver says about half the load of one chamber is gone; the other chambers hold.',
      },
    ],
    receptors: receptorsOn(USUAL, 'ammonia-solution'),
  });

export const hypochloriteLeak = scenario(
  'S02', 'Creamery, hypochlorite to the Quillock in two hours, low flow',
  'A loss that decides: half-life 0.5 h in the water. Little warning time for the hatchery, then dilution by the Ollemar.',
  {
    startAt: '2031-01-20T14:00:00-08:00', horizonS: 24 * HOUR_S, frameCount: 72,
    substance: { ...substance('sodium-hypochlorite'), applyLoss: true },
    water: LOW,
    releases: [
      {
        id: 'release-1', ...source('creamery'), timing: { kind: 'steady', startS: 0, durationS: 2 * HOUR_S },
        amount: { how: 'volume-strength', volumeM3: { low: 0.6, likely: 1.2, high: 1.2 }, strengthKgM3: 120 },
        spilledVolumeM3: 1.2, evidence: 'Day tank of 1,200 l empty; the shift saw it full two hours before.',
      },
    ],
    receptors: receptorsOn(LOW, 'sodium-hypochlorite'),
  },
);

const ORCHARD = { startAt: '2031-11-03T22:15:00-08:00', horizonS: 36 * HOUR_S, frameCount: 72 };

/** Fire-water from the orchard store with the flow of Evarrow as the dam lets it. */
const orchardFire = (key: string, name: string, note: string, flow: Omit<Parameters<typeof river>[0], 'name'>): SeedScenario =>
  scenario(key, name, note, {
    ...ORCHARD,
    substance: substance('chlorpyrifos'),
    water: river({ name: 'Q50', ...flow }, 13),
    releases: [
      {
        id: 'release-1', ...source('orchard-store'), timing: { kind: 'steady', startS: 0, durationS: 6 * HOUR_S },
        amount: { how: 'mass', massKg: { low: 1, likely: 2.5, high: 2.5 } },
        evidence: 'Store list of the growers; all of it taken as lost. Half-life not known: reckoned without loss.',
      },
    ],
    receptors: receptorsOn(USUAL, 'chlorpyrifos'),
  });

const set = (evarrow: number, middle: number, lower: number) => [
  { reachId: 'evarrow', dischargeM3s: evarrow },
  { reachId: 'ol-middle', dischargeM3s: middle },
  { reachId: 'ol-lower', dischargeM3s: lower },
];
const DAM_AT_2 = { discharges: set(2, 11, 13.5), source: 'Thessaby Dam at 2 m3/s; Ollemar above and Quillock at the flow exceeded half the time' };

export const orchardFires: SeedScenario[] = [
  orchardFire('S03', 'Orchard store fire-water, dam left at 2 m3/s', 'The choice to compare with: little dilution, late arrival. Half-life not known, at night.', DAM_AT_2),
  orchardFire('S03-R', 'Orchard store fire-water, dam raised to 12 m3/s after half an hour', 'Unsteady flow: the wave of the dam runs ahead of the water. Lower and shorter, but earlier.', {
    ...DAM_AT_2,
    series: [{ reachId: 'evarrow', rows: [[-24 * HOUR_S, 2], [0.5 * HOUR_S, 2], [0.75 * HOUR_S, 12], [72 * HOUR_S, 12]].map(([atS, dischargeM3s]) => ({ atS: atS!, dischargeM3s: dischargeM3s! })) }],
    source: 'Thessaby Dam from 2 to 12 m3/s between T0 + 0.5 h and T0 + 0.75 h',
  }),
  orchardFire('S03-12', 'Orchard store fire-water, dam at 12 m3/s throughout', 'The other end of the choice, as if both turbines had run all along.', {
    discharges: set(12, 21, 23.5), source: 'Thessaby Dam at 12 m3/s; Ollemar above and Quillock at the flow exceeded half the time',
  }),
];

export const platingBath = scenario(
  'S04', 'Plating works, chromium(VI) bath in 45 minutes, low flow',
  'Bank side: the offtake 0.8 km below lies on the bank of the release, long before the river is mixed. Far above the action value at the first intake.',
  {
    startAt: '2031-02-09T10:20:00-08:00', horizonS: 42 * HOUR_S, frameCount: 84,
    substance: substance('chromium-vi'),
    water: LOW,
    releases: [
      {
        id: 'release-1', ...source('plating-works'), timing: { kind: 'steady', startS: 0, durationS: 45 * 60 },
        amount: { how: 'volume-strength', volumeM3: { low: 1.5, likely: 3, high: 3 }, strengthKgM3: 150 },
        spilledVolumeM3: 3, evidence: 'One bath of 3.0 m3 drained; bath sheet gives 150 g/l as Cr(VI).',
      },
    ],
    receptors: [
      {
        id: 'stk-1', code: 'STK-1', name: 'Stock water offtake, km 44.2', kind: 'other', ...withoutWater(onReach('ol-upper', 44.2, 'right')),
        actionValues: [{ value: 16e-6, basis: 'Cr(VI)', averagingS: HOUR_S, source: 'US EPA aquatic life, acute; no value for stock given' }],
      },
      ...receptorsOn(LOW, 'chromium-vi'),
    ],
  },
);

// T0 is high water slack: the strongest ebb runs a quarter of a tide later.
const ESTUARY = estuary({ name: 'Q50', source: 'Springs; high water at the bar 17:35' }, TIDE_S / 4);

export const bargeHatch = scenario(
  'S09', 'Barge hatch in the estuary at high water, MCPA',
  'Reversal: the ebb takes it past the marsh sluice and the flood brings it back, so the sluice stays shut for two tides.',
  {
    startAt: '2031-05-12T17:35:00-08:00', horizonS: 4 * TIDE_S, frameCount: 96,
    substance: substance('mcpa'),
    water: ESTUARY,
    releases: [{ id: 'release-1', ...source('barge-berth'), timing: { kind: 'instantaneous' }, amount: { how: 'mass', massKg: { low: 10, likely: 25, high: 25 } }, evidence: 'One hatch opened; half of it may be left.' }],
    receptors: receptorsOn(ESTUARY, 'mcpa'),
  },
);

function withoutWater({ position, channel }: ReturnType<typeof onReach>) {
  return { position, channel };
}
