import { HOUR_S, maxFloodS, openWater, receptorsOf, scenario, source, substance, TIDE_S, type SeedScenario } from './scenarios-parts';

const DAY_S = 24 * HOUR_S;
/** Inner basin: 900 x 400 m, 9 m deep. */
const BASIN = { volumeM3: 3.24e6, surfaceAreaM2: 360_000 };

export const copperInBasin = scenario(
  'S07', 'Copper sulfate cargo in the inner basin',
  'A stirred basin flushed by the tide: days to weeks, not hours. As copper, not as the hydrate.',
  {
    startAt: '2031-03-21T09:00:00-08:00', horizonS: 18 * DAY_S, frameCount: 72,
    substance: substance('copper-sulfate'),
    water: openWater('kestovar-harbour', {
      current: [{ kind: 'residual', speedMps: 0.03, towardDeg: 96 }],
      box: { ...BASIN, tidalRangeM: 2.3, periodS: TIDE_S, returnFraction: 0.5 },
      coefficientNote: 'Springs to neaps: mean range 2.3 m; half of what leaves comes back (invented)',
    }),
    releases: [
      {
        id: 'release-1', ...source('harbour-cargo'), timing: { kind: 'steady', startS: 0, durationS: 6 * HOUR_S },
        amount: { how: 'mass', massKg: { low: 1_000, likely: 2_000, high: 2_000 }, activeFraction: 0.2545 },
        evidence: 'Tally of the bags on the quay; 2,000 kg of the pentahydrate over the edge.',
      },
    ],
    receptors: [
      {
        id: 'gap-1', code: 'GAP-1', name: 'Gap of the inner basin', kind: 'other', position: [-117.289, -44.4924],
        actionValues: [{ value: 4.8e-6, basis: 'dissolved', averagingS: HOUR_S, source: 'US EPA aquatic life, sea water, acute: what leaves for the cockle flats and the pens' }],
      },
    ],
  },
);

const QUAY_AT = '2031-05-12T19:00:00-08:00';

export const foamAtQuay = scenario(
  'S08', 'Warehouse fire-water at the river quay, PFAS, springs',
  'Tide and residual: whether and when the desalination intake is reached hinges on the residual current. Its storage lasts 24 h.',
  {
    startAt: QUAY_AT, horizonS: 60 * HOUR_S, frameCount: 90,
    substance: substance('pfas-20'),
    water: openWater('branvell-bay', {
      depthM: 12, mixingDepthM: 6,
      current: [
        { kind: 'tide', name: 'M2', majorMps: 0.25, minorMps: 0, floodTowardDeg: 10, periodS: TIDE_S, maxFloodS: maxFloodS(QUAY_AT) },
        { kind: 'residual', speedMps: 0.08, towardDeg: 350 },
      ],
      coefficientNote: 'Springs in the bay, residual 0.08 m/s toward 350; from 2 km off the bar on',
    }),
    releases: [
      {
        // The estuary part is not reckoned: the spring ebb takes the quay's water past the bar within the hour.
        id: 'release-1', ...source('quay-warehouse'), position: [-117.329, -44.497], timing: { kind: 'steady', startS: 0, durationS: 8 * HOUR_S },
        amount: { how: 'volume-strength', volumeM3: { low: 600, likely: 1_200, high: 1_200 }, strengthKgM3: 0.015 },
        spilledVolumeM3: 1_200, evidence: 'Pump log of the fire service; strength of the run-off from one sample. Taken from 2 km off the bar, where the ebb leaves it.',
      },
    ],
    receptors: receptorsOf('branvell-bay', 'pfas-20'),
  },
);

const OVERFLOW_AT = { evening: '2031-01-15T20:00:00-08:00', morning: '2031-01-15T05:00:00-08:00' };

/** Storm overflow at neaps with a southerly breeze behind it. */
const stormOverflow = (key: string, name: string, note: string, startAt: string, applyLoss: boolean): SeedScenario =>
  scenario(key, name, note, {
    startAt, horizonS: 36 * HOUR_S, frameCount: 72,
    substance: { ...substance('e-coli'), applyLoss },
    water: openWater('branvell-bay', {
      depthM: 12, mixingDepthM: 6,
      current: [
        { kind: 'tide', name: 'M2', majorMps: 0.12, minorMps: 0, floodTowardDeg: 10, periodS: TIDE_S, maxFloodS: maxFloodS(startAt) },
        { kind: 'residual', speedMps: 0.08, towardDeg: 350 },
        { kind: 'wind', windSpeedMps: 5, windFromDeg: 180, driftFraction: 0.02 },
      ],
      coefficientNote: 'Neaps in the bay, residual 0.08 m/s toward 350, wind 5 m/s from 180 of which 2 % moves the upper 6 m (common practice, no source)',
    }),
    releases: [
      {
        id: 'release-1', ...source('storm-overflow'), channel: null, position: [-117.325, -44.497], timing: { kind: 'steady', startS: 0, durationS: 5 * HOUR_S },
        amount: { how: 'volume-count', volumeM3: { likely: 14_400 }, countPerM3: 2e10 },
        spilledVolumeM3: 14_400, evidence: '0.8 m3/s for 5 h by the level in the chamber; strength from last winter. Taken from 1.5 km off the bar, where the ebb leaves it.',
      },
    ],
    receptors: receptorsOf('branvell-bay', 'e-coli'),
  });

export const stormOverflows: SeedScenario[] = [
  stormOverflow('S10', 'Storm overflow, neaps, no die-off', 'The cautious run: without die-off.', OVERFLOW_AT.evening, false),
  stormOverflow('S10-A', 'Storm overflow in the evening, neaps', 'Die-off by night and day: T90 20 h in the dark, 4 h from 06 to 18. A night ahead of it.', OVERFLOW_AT.evening, true),
  stormOverflow('S10-B', 'Storm overflow before dawn, neaps', 'The same with a day ahead of it: decides the hours of the bathing flag.', OVERFLOW_AT.morning, true),
];
