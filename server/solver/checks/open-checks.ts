import type { EstimateReceptor } from '../../../shared/schemas/estimate';
import type { Check } from '../../../shared/schemas/estimate-result';
import { durationText, lengthText, sig } from '../format';
import type { OpenFacts } from '../open/open-solver';
import { firstSizeText } from './first-size';
import { nearFieldOf } from './near-field';
import { meanSpeedMps } from './place-water';
import { checksBy, type Rule } from './rule';

/** Below this a current is as good as unknown (common practice, no source). */
const WEAK_CURRENT_MPS = 0.02;
const OKUBO_LEAST_M = 100;
const OKUBO_LEAST_S = 3_600;
const OKUBO_MOST_S = 31 * 86_400;

/** Mean speed over the run and the mean speed across a shore, m/s, from 200 samples. */
function speedsOf({ freeCurrent, input, shore }: OpenFacts): { mean: number; across: number } {
  const out = new Float64Array(2);
  let mean = 0;
  let across = 0;
  const samples = 200;
  for (let i = 0; i < samples; i++) {
    freeCurrent.velocity((input.doc.horizonS * (i + 0.5)) / samples, out);
    mean += Math.hypot(out[0]!, out[1]!) / samples;
    if (shore) across += Math.abs(out[1]! * shore.ex - out[0]! * shore.ey) / samples;
  }
  return { mean, across };
}

/** Net drift over the estimate and the standard deviation of the oldest cloud at its end, m. */
function driftOf({ freeCurrent, motion, input }: OpenFacts): { net: number; sigmaM: number } {
  const out = new Float64Array(2);
  const startS = Math.min(...input.releases.map((release) => release.profile.startS));
  freeCurrent.displacement(startS, out);
  const [x, y] = [out[0]!, out[1]!];
  freeCurrent.displacement(input.doc.horizonS, out);
  return { net: Math.hypot(out[0]! - x, out[1]! - y), sigmaM: Math.sqrt(motion.spread.smallest(input.doc.horizonS - startS)) };
}

/** How much of a fixed tensor's difference lies askew to the shore, 0 to 1. */
function askew({ water, shore }: OpenFacts): number {
  if (!shore || water.mixing.kind !== 'constant' || water.mixing.turnsWithCurrent || water.mixing.alongM2s === water.mixing.acrossM2s) return 0;
  const angle = (water.mixing.axisTowardDeg * Math.PI) / 180 - Math.atan2(shore.ex, shore.ey);
  return Math.abs(Math.sin(2 * angle));
}

const runRules: readonly Rule<OpenFacts>[] = [
  {
    code: 'weak-current',
    severity: 'warn',
    title: 'Hardly any current',
    test(facts) {
      const { mean } = speedsOf(facts);
      const drift = driftOf(facts);
      if (mean >= WEAK_CURRENT_MPS * (1 - 1e-9) && drift.net < drift.sigmaM)
        return { detail: `At the end the cloud has drifted ${lengthText(drift.net)}, less than its own size of ${lengthText(drift.sigmaM)} (one standard deviation).`, remedy: 'It spreads more than it goes: read it as a circle round the release.' };
      return mean < WEAK_CURRENT_MPS * (1 - 1e-9)
        ? { detail: `The mean current over the estimate is ${sig(mean, 2)} m/s, below ${WEAK_CURRENT_MPS} m/s.`, remedy: 'Direction and arrival are not known at this speed: read the cloud as a circle round the release, and measure the current.' }
        : null;
    },
  },
  {
    code: 'shore-current',
    severity: 'warn',
    title: 'Current across the straight shore left out',
    test(facts) {
      const { mean, across } = speedsOf(facts);
      return facts.shore && across > Math.max(0.005, 0.1 * mean)
        ? { detail: `The part of the current across the shore is ${sig(across, 2)} m/s on average, ${sig((100 * across) / mean, 2)} % of its speed; a wall does not allow it.`, remedy: 'Turn the current along the shore, or leave the straight shore out.' }
        : null;
    },
  },
  {
    code: 'tensor-askew',
    severity: 'warn',
    title: 'Spreading axes not in line with the shore',
    test(facts) {
      const share = askew(facts);
      return share > 0.05
        ? { detail: `The stated axis lies askew to the shore (${sig(100 * share, 2)} % of the askew part is left out).`, remedy: 'Give the axis along the shore, or spread alike in all directions.' }
        : null;
    },
  },
  {
    code: 'mixing-depth',
    severity: 'note',
    title: 'Taken as mixed over part of the depth',
    test: ({ water }) =>
      water.mixingDepthM < 0.99 * water.depthM
        ? { detail: `The estimate mixes over ${sig(water.mixingDepthM, 3)} m of ${sig(water.depthM, 3)} m from the surface down.`, remedy: 'Deep intakes may stay clear; where the water is mixed to the bed the figures fall in proportion.' }
        : null,
  },
  {
    code: 'uncalibrated',
    severity: 'note',
    title: 'Not calibrated on this water',
    test: ({ water }) =>
      water.calibrated
        ? null
        : {
            detail: water.mixing.kind === 'okubo' ? `Spreading is the mean of dye patches in the sea, times ${sig(water.mixing.varianceFactor, 3)}.` : 'Mixing coefficients are stated, not measured here.',
            remedy: 'Spread as variance may be a factor of 3 wider or narrower; a drifter or dye test would tell.',
          },
  },
];

type ReceptorFacts = OpenFacts & { readonly receptor: EstimateReceptor; readonly distanceM: number; readonly movedM: number };

const receptorRules: readonly Rule<ReceptorFacts>[] = [
  {
    code: 'near-field',
    severity: 'stop',
    title: 'Too near the release',
    test({ input, distanceM, water }) {
      const radius = Math.max(...input.releases.map((release) => release.release.initialRadiusM));
      const { leastM, why } = nearFieldOf(input.doc, water.mixingDepthM, input.doc.conditions?.dischargeJet ? meanSpeedMps(input.doc) : 0, radius);
      return distanceM < leastM ? { detail: `${lengthText(distanceM)} from the release; jets, eddies and depth decide within ${lengthText(leastM)} (${why}).`, remedy: 'Treat it as reached at once.' } : null;
    },
  },
  {
    code: 'depth-mixing',
    severity: 'warn',
    title: 'May not yet be mixed over depth',
    test: ({ distanceM, water }) =>
      distanceM >= 10 * water.mixingDepthM && distanceM < 50 * water.mixingDepthM
        ? { detail: `${lengthText(distanceM)} from the release is less than fifty mixing depths (${lengthText(50 * water.mixingDepthM)}).`, remedy: 'The surface may carry more than the figure given.' }
        : null,
  },
  {
    code: 'first-size',
    severity: 'warn',
    title: 'The size of the first cloud decides',
    test({ input, distanceM, water, motion }) {
      const ageS = distanceM / Math.max(motion.current.maxSpeedMps, 1e-6);
      return firstSizeText(input.releases, water.mixingDepthM, (release) => Math.sqrt(release.initialRadiusM ** 2 / 4 + motion.spread.smallest(ageS)));
    },
  },
  {
    code: 'receptor-moved',
    severity: 'note',
    title: 'Moved onto the water',
    test: ({ movedM }) => (movedM > 0 ? { detail: `The receptor lies ${lengthText(movedM)} outside the drawn water; the figures are for the nearest water.`, remedy: 'Mend its position or the outline if that is wrong.' } : null),
  },
  {
    code: 'beach',
    severity: 'warn',
    title: 'Surf and shore eddies',
    test: ({ receptor, water, input, distanceM }) =>
      input.doc.conditions?.isSurfZone || (receptor.kind === 'bathing' && (water.waterKind === 'coast' || water.waterKind === 'lake'))
        ? { detail: `${input.doc.conditions?.isSurfZone ? 'Breaking waves are stated.' : 'It is a bathing water at an open shore.'} Waves, rips and eddies hold water there for hours, however the ${lengthText(distanceM)} from the release were covered.`, remedy: 'Expect it later, longer and patchier; sample at the beach before reopening.' }
        : null,
  },
  {
    code: 'below-layer',
    severity: 'note',
    title: 'Below the mixed layer',
    test: ({ receptor, water }) =>
      receptor.depthM !== null && receptor.depthM > water.mixingDepthM
        ? { detail: `It draws at ${sig(receptor.depthM, 3)} m; the substance is taken as mixed to ${sig(water.mixingDepthM, 3)} m.`, remedy: 'The figures are for the layer above and are likely high for this depth.' }
        : null,
  },
  {
    code: 'okubo-range',
    severity: 'warn',
    title: 'Outside the range of the spreading data',
    test({ water, distanceM, motion, input }) {
      if (water.mixing.kind !== 'okubo') return null;
      const soonest = distanceM / Math.max(motion.current.maxSpeedMps, 1e-6);
      if (distanceM < OKUBO_LEAST_M || soonest < OKUBO_LEAST_S)
        return { detail: `${lengthText(distanceM)} and at the soonest ${durationText(soonest)} from the release; the data begin at 100 m and 1 h.`, remedy: 'Use measured mixing coefficients at this distance.' };
      return input.doc.horizonS > OKUBO_MOST_S ? { detail: `The estimate runs ${durationText(input.doc.horizonS)}; the data end at one month.`, remedy: 'Shorten the estimate.' } : null;
    },
  },
];

export const openRunChecks = (facts: OpenFacts): Check[] => checksBy(runRules, facts, null);
export const openReceptorChecks = (facts: ReceptorFacts): Check[] => checksBy(receptorRules, facts, facts.receptor.id);
