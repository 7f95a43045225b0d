import type { CurrentPart } from '../../../../shared/schemas/estimate';
import { rateFromT90 } from '../../../../shared/units';
import { HOUR_S, openWater, receptorsOf, scenario, source, substance, type SeedScenario } from './scenarios-parts';

const LAKE = 'lake-thessaby';

/** Benzene from petrol, with the share of the wind at which the upper four metres move. */
const petrolAtJetty = (percent: 1 | 2 | 3): SeedScenario => {
  const note = percent === 2 ? 'The middle of three: the answer hinges on drift and evaporation. Where they disagree it cannot be said whether the tower is reached; draw from 9 or 15 m.' : `Compare with 2 %: the same at ${percent} % of the wind.`;
  return scenario(`S05-${percent}`, `Petrol at the lake jetty, benzene, drift ${percent} % of the wind`, note, {
    startAt: '2031-12-14T12:00:00-08:00', horizonS: 72 * HOUR_S, frameCount: 72,
    substance: substance('benzene'),
    water: openWater(LAKE, {
      mixingDepthM: 4,
      current: [{ kind: 'wind', windSpeedMps: 5, windFromDeg: 135, driftFraction: percent / 100 }],
      coefficientNote: 'Thermocline at 8 m, upper 4 m mixed; wind 5 m/s from 135. Drift 1 to 3 % of the wind (common practice, no source)',
    }),
    releases: [
      {
        id: 'release-1', ...source('lake-jetty'), timing: { kind: 'steady', startS: 0, durationS: 4 * HOUR_S },
        amount: { how: 'mass', massKg: { low: 10, likely: 30, high: 60 } },
        evidence: '8,000 l of petrol; what dissolves of it is the estimate of the engineer. The floating part is not reckoned.',
      },
    ],
    receptors: receptorsOf(LAKE, 'benzene'),
  });
};

/** Slurry reaching the lake at the jetty in three hours, winter, with a slow current along the lake. */
function slurryAtJetty(key: string, substanceId: 'e-coli' | 'digester-ammonia', name: string, note: string): SeedScenario {
  const isCount = substanceId === 'e-coli';
  const drift: CurrentPart[] = [{ kind: 'residual', speedMps: 0.02, towardDeg: 298 }];
  return scenario(key, name, note, {
    startAt: '2031-07-06T05:30:00-08:00', horizonS: 4 * 24 * HOUR_S, frameCount: 96,
    substance: {
      ...substance(substanceId),
      loss: isCount ? { kind: 'first-order', ratePerS: rateFromT90(40 * HOUR_S), source: 'T90 of 40 h in cold water (demonstration)' } : { kind: 'none' },
      applyLoss: isCount,
    },
    water: openWater(LAKE, { mixingDepthM: 6, current: drift, coefficientNote: 'Mixed depth and current as seen from the jetty: 6 m, 2 cm/s along the shore' }),
    releases: [
      {
        id: 'release-1', ...source('digester'), timing: { kind: 'steady', startS: 0, durationS: 3 * HOUR_S },
        amount: isCount ? { how: 'volume-count', volumeM3: { low: 200, likely: 300, high: 400 }, countPerM3: 3e11 } : { how: 'volume-strength', volumeM3: { low: 200, likely: 300, high: 400 }, strengthKgM3: 3 },
        spilledVolumeM3: 300, evidence: 'Level of the digester before and after.',
      },
    ],
    receptors: receptorsOf(LAKE, substanceId),
  });
}

export const lakeScenarios: SeedScenario[] = [
  petrolAtJetty(1),
  petrolAtJetty(2),
  petrolAtJetty(3),
  slurryAtJetty('S06', 'e-coli', 'Digester slurry at the jetty in winter, E. coli', 'Counts instead of mass; about at the bathing value, outside the season; four days.'),
  slurryAtJetty('S06-N', 'digester-ammonia', 'Digester slurry at the jetty in winter, ammonia', 'The same slurry weighed as nitrogen.'),
];
