import type { EstimateReceptor } from '../../../shared/schemas/estimate';
import type { Check } from '../../../shared/schemas/estimate-result';
import { durationText, lengthText, sig } from '../format';
import { acrossMixingLengthM, depthMixingLengthM } from '../physics/channel-mixing';
import { acrossAt } from '../river/across';
import { tauAt } from '../river/river-response';
import type { PathPlace, RiverPath } from '../river/path';
import type { RiverFacts } from '../river/river-solver';
import { firstSizeText } from './first-size';
import { nearFieldOf } from './near-field';
import { checksBy, type Rule } from './rule';

const usedStates = ({ states, paths }: RiverFacts) => states.filter((state) => paths.some((path) => path.bySegment.has(state.reach.id)));

const runRules: readonly Rule<RiverFacts>[] = [
  {
    code: 'discharge-balance',
    severity: 'warn',
    title: 'Discharges do not add up',
    test({ states }) {
      const bad = states.flatMap((into) => {
        const above = states.filter((state) => state.reach.downstreamReachId === into.reach.id);
        const sum = above.reduce((total, state) => total + state.dischargeM3s, 0);
        return above.length > 0 && Math.abs(into.dischargeM3s - sum) > 0.15 * into.dischargeM3s ? [`${into.reach.name} carries ${sig(into.dischargeM3s)} m³/s, the reaches above it ${sig(sum)} m³/s`] : [];
      });
      return bad.length > 0 ? { detail: `${bad.join('; ')}.`, remedy: 'Set the discharge of each reach so that they add up at the confluences.' } : null;
    },
  },
  {
    code: 'continuity',
    severity: 'warn',
    title: 'Width, depth and velocity do not give the discharge',
    test(facts) {
      const bad = usedStates(facts).filter((state) => Math.abs(state.widthM * state.depthM * state.speedMps - state.dischargeM3s) > 0.1 * state.dischargeM3s);
      return bad.length > 0
        ? { detail: bad.map((state) => `${state.reach.name}: W·H·U = ${sig(state.widthM * state.depthM * state.speedMps)} m³/s, Q = ${sig(state.dischargeM3s)} m³/s`).join('; ') + '.', remedy: 'Mend the figures of the water register; concentrations go by the discharge, times by the velocity.' }
        : null;
    },
  },
  {
    code: 'extrapolation-shape',
    severity: 'warn',
    title: 'Outside the range of the dispersion formula',
    test(facts) {
      const bad = usedStates(facts).filter((state) => state.reach.dispersionM2s === null && (state.widthM / state.depthM < 10 || state.widthM / state.depthM > 150));
      return bad.length > 0 ? { detail: bad.map((state) => `${state.reach.name}: width over depth ${sig(state.widthM / state.depthM, 3)}`).join('; ') + '; the data lie between 10 and 150.', remedy: 'Measure the dispersion, or read the peak as uncertain by more than a factor of 2.' } : null;
    },
  },
  {
    code: 'flow-range',
    severity: 'warn',
    title: 'Discharge outside the known flows',
    test(facts) {
      const bad = usedStates(facts).filter(({ reach, dischargeM3s }) => {
        const known = reach.hydraulics.map((row) => row.dischargeM3s);
        return dischargeM3s < 0.5 * Math.min(...known) || dischargeM3s > 2 * Math.max(...known);
      });
      return bad.length > 0 ? { detail: bad.map((state) => `${state.reach.name}: ${sig(state.dischargeM3s)} m³/s`).join('; ') + ' lies more than a factor of 2 outside the flows with figures.', remedy: 'Width, depth and velocity are carried on by power laws: check them.' } : null;
    },
  },
  {
    code: 'uncalibrated',
    severity: 'note',
    title: 'Not calibrated on this river',
    test(facts) {
      const bad = usedStates(facts).filter((state) => !state.reach.calibrated);
      return bad.length > 0
        ? { detail: `Dispersion is not from a dye test in ${bad.map((state) => state.reach.name).join(', ')}.`, remedy: 'Dispersion may be off by a factor of 3, the peak by 1.7; arrival times go with the velocity.' }
        : null;
    },
  },
];

type ReceptorFacts = RiverFacts & { readonly receptor: EstimateReceptor; readonly place: PathPlace; readonly path: RiverPath };

const isMid = ({ path }: ReceptorFacts): boolean => path.release.release.channel!.bank === 'mid';

const receptorRules: readonly Rule<ReceptorFacts>[] = [
  {
    code: 'near-field',
    severity: 'stop',
    title: 'Too near the release',
    test({ place, path, input }) {
      const { state } = path.segments[0]!;
      const { leastM, why } = nearFieldOf(input.doc, state.depthM, state.speedMps, path.release.release.initialRadiusM);
      return Math.abs(place.distanceM) < leastM
        ? { detail: `${lengthText(Math.abs(place.distanceM))} from the release; eddies and depth decide within ${lengthText(leastM)} (${why}).`, remedy: 'Treat it as reached at once.' }
        : null;
    },
  },
  {
    code: 'depth-mixing',
    severity: 'warn',
    title: 'May not yet be mixed over depth',
    test({ place, path }) {
      const { state } = path.segments[0]!;
      const length = depthMixingLengthM(state.speedMps, state.depthM, state.shearMps);
      return place.distanceM >= 0 && place.distanceM < length ? { detail: `${lengthText(place.distanceM)} from the release, mixing over depth takes ${lengthText(length)}.`, remedy: 'The layer of the release may carry more than the figure given.' } : null;
    },
  },
  {
    code: 'across-mixing',
    severity: 'warn',
    title: 'Not mixed across',
    test(facts) {
      const { place } = facts;
      const { state } = place.segment;
      const length = acrossMixingLengthM(state.speedMps, state.widthM, state.transverseM2s, isMid(facts));
      const at = (eta: number): number => acrossAt(place.segment.across, eta, tauAt(place, Math.max(1, place.travelS)));
      const [left, right] = [at(0), at(1)];
      return Math.abs(left - right) > 0.05 || Math.abs(at(0.5) - 1) > 0.05
        ? { detail: `Left bank ${sig(left, 3)}, right bank ${sig(right, 3)} times the section mean; mixing across takes about ${lengthText(length)} in this reach.`, remedy: 'Sample on both banks; a far-bank intake may have more time.' }
        : null;
    },
  },
  {
    code: 'early-regime',
    severity: 'warn',
    title: 'The cloud is still lopsided',
    test({ place, path }) {
      const { state } = path.segments[0]!;
      const least = (0.4 * state.widthM ** 2) / state.transverseM2s;
      return place.travelS >= 0 && place.travelS < least
        ? { detail: `Travel time ${durationText(place.travelS)}; the normal cloud needs 0.4 W²/e = ${durationText(least)}.`, remedy: 'The front may come earlier and the tail stay longer than stated: start sampling early.' }
        : null;
    },
  },
  {
    code: 'first-size',
    severity: 'warn',
    title: 'The size of the first cloud decides',
    test({ input, place, path }) {
      const { state } = path.segments[0]!;
      const sigmaM = Math.sqrt(path.startVarianceS2 + 2 * place.kappaS * Math.max(0, place.travelS)) * place.segment.state.speedMps;
      return place.travelS > 0 ? firstSizeText(input.releases.filter((release) => release === path.release), state.depthM, () => sigmaM) : null;
    },
  },
  {
    code: 'tidal-reach',
    severity: 'stop',
    title: 'In tidal water',
    test: ({ place }) =>
      place.segment.state.reach.tidal
        ? { detail: `${place.segment.state.reach.name} is tidal; the estimate uses the river's seaward flow of ${sig(place.segment.state.speedMps, 3)} m/s only.`, remedy: 'Give the reach its tidal current, so that the water comes and goes, or estimate the estuary as open water with its tide.' }
        : null,
  },
  {
    code: 'extrapolation-time',
    severity: 'warn',
    title: 'Travel time outside the range of experience',
    test: ({ place }) =>
      place.travelS > 200 * 3_600 || (place.travelS >= 0 && place.travelS < 3_600 && place.distanceM > 0)
        ? { detail: `Travel time ${durationText(place.travelS)}; the data behind the coefficients lie between 1 h and 200 h.`, remedy: 'Read times and peak as rough.' }
        : null,
  },
];

export const riverRunChecks = (facts: RiverFacts): Check[] => checksBy(runRules, facts, null);
export const riverReceptorChecks = (facts: ReceptorFacts): Check[] => checksBy(receptorRules, facts, facts.receptor.id);
