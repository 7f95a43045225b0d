import { HOUR_S, maxFloodS, openWater, receptorsOf, scenario, source, substance, TIDE_S, type SeedScenario } from './scenarios-parts';
import { rateFromT90 } from '../../../../shared/units';

const BAY = 'branvell-bay';
const CONTAINER_AT = '2031-08-02T03:00:00-08:00';

const containerAtSea = scenario(
  'S11', 'Phenol container off the bay, neaps, south-westerly wind',
  'Direction in doubt; two values for one substance, taint and chlorination. Toxic through the skin and by vapour.',
  {
    startAt: CONTAINER_AT, horizonS: 36 * HOUR_S, frameCount: 73,
    substance: substance('phenol'),
    water: openWater(BAY, {
      current: [
        { kind: 'tide', name: 'M2', majorMps: 0.18, minorMps: 0, floodTowardDeg: 350, periodS: TIDE_S, maxFloodS: maxFloodS(CONTAINER_AT) },
        { kind: 'residual', speedMps: 0.1, towardDeg: 30 },
        { kind: 'wind', windSpeedMps: 8, windFromDeg: 225, driftFraction: 0.02, turnDeg: 0 },
      ],
      coefficientNote: 'Neaps; residual 0.10 m/s toward 030; wind 8 m/s from 225, of which 2 % moves the upper 6 m (1 to 2 % for 1 to 5 m is common practice, no source)',
    }),
    releases: [
      {
        id: 'release-1', ...source('container-route'), timing: { kind: 'steady', startS: 0, durationS: 12 * HOUR_S },
        amount: { how: 'mass', massKg: { low: 10_000, likely: 20_000, high: 20_000 } },
        evidence: 'One container of 20 t reported holed; the ship keeps its place.',
      },
    ],
    receptors: receptorsOf(BAY, 'phenol'),
  },
);

const FLOW_M3S = 0.45;
const OUTFALL_S = 36 * HOUR_S;
/** Set by the engineer for the diffuser: what is in the water at the edge of the near field is the effluent sixty times diluted. */
const INITIAL_DILUTION = 60;

/** Outfall failure with the cloud taken from the edge of the near field on. */
function outfallFailure(key: string, substanceId: 'e-coli' | 'digester-ammonia', name: string, note: string): SeedScenario {
  const volumeM3 = { likely: FLOW_M3S * OUTFALL_S };
  const isCount = substanceId === 'e-coli';
  return scenario(key, name, note, {
    startAt: '2031-01-18T08:00:00-08:00', horizonS: 72 * HOUR_S, frameCount: 72,
    substance: {
      ...substance(substanceId),
      ...(isCount ? { loss: { kind: 'first-order' as const, ratePerS: rateFromT90(10 * HOUR_S), source: 'T90 of 10 h, day and night together (demonstration)' } } : {}),
      applyLoss: isCount,
    },
    water: openWater(BAY, {
      depthM: 16,
      current: [{ kind: 'residual', speedMps: 0.06, towardDeg: 45 }],
      coefficientNote: 'Residual 0.06 m/s toward the shore, the direction that matters; initial dilution 60, upper 6 m mixed',
    }),
    releases: [
      {
        id: 'release-1', ...source('sea-outfall'), timing: { kind: 'steady', startS: 0, durationS: OUTFALL_S },
        amount: isCount ? { how: 'volume-count', volumeM3, countPerM3: 1e9 } : { how: 'volume-strength', volumeM3, strengthKgM3: 0.035 },
        spilledVolumeM3: INITIAL_DILUTION * volumeM3.likely, evidence: 'Works flow meter; screens bypassed for 36 h.',
      },
    ],
    receptors: receptorsOf(BAY, substanceId),
  });
}

export const coastScenarios: SeedScenario[] = [
  containerAtSea,
  outfallFailure('S12', 'e-coli', 'Outfall failure for 36 hours, E. coli (EXERCISE)', 'A negative result and how to word it: not predicted to exceed, by more than ten times. Figures begin at the edge of the near field.'),
  outfallFailure('S12-N', 'digester-ammonia', 'Outfall failure for 36 hours, ammonia (EXERCISE)', 'The same effluent as nitrogen.'),
];
