import type { EstimateReceptor } from '../../../shared/schemas/estimate';
import type { ResolvedRelease } from '../release-profile';
import type { RunInput } from '../types';
import type { PathFlow } from './path-flow';

/** Step, parcels and tubes of one run. */
export type Resolution = {
  readonly stepS: number;
  readonly steps: number;
  /** Length of a new parcel where tides rule, m. */
  readonly tidalLengthM: number;
  readonly tubes: number;
  /** Steps for a standard deviation of the passage at the sharpest receptor; null where no receptor lies downstream. */
  readonly perSigma: number | null;
};

const FULL = { perSigma: 16, along: 3_000, steps: 8_000, fewest: 240, tubes: 17 } as const;
const PREVIEW = { perSigma: 6, along: 200, steps: 300, fewest: 100, tubes: 9 } as const;

/** Values stepped for one estimate at most, all releases together: about ten seconds. */
const MOST_WORK = 5e8;

/**
 * The step: a sixteenth of the standard deviation of the passage at the receptor where it is sharpest (a sixth in a
 * preview), but no more than 3,000 parcels along the way, 8,000 steps, and
 * 500 million values over all releases. `refine` divides it, for convergence tests.
 */
export function resolutionFor(input: RunInput, release: ResolvedRelease, flow: PathFlow, sourceM: number, receptorsM: readonly number[], refine: number): Resolution {
  const limits = input.isPreview ? PREVIEW : FULL;
  const spanS = input.doc.horizonS - release.profile.startS;
  const { initialRadiusM } = release.release;
  const speed = flow.isTidal ? flow.fastestMps : flow.reaches[flow.reachAt(sourceM)]!.state.speedMps;
  const passages = receptorsM.flatMap((x) => {
    const far = Math.abs(x - sourceM);
    if (flow.isTidal) {
      const { dispersionM2s } = flow.reaches[flow.reachAt(sourceM)]!.state;
      return [{ T: far / speed, sigma: Math.sqrt((2 * dispersionM2s * far) / speed + initialRadiusM ** 2 / 4) / speed }];
    }
    return x > sourceM ? [{ T: flow.travelS(sourceM, x), sigma: Math.sqrt(flow.varianceS2(sourceM, x) + (initialRadiusM / (2 * speed)) ** 2) }] : [];
  });
  const met = passages.filter(({ T, sigma }) => T - 4 * sigma < spanS && sigma > 0);
  const sharpest = met.length > 0 ? Math.min(...met.map(({ sigma }) => sigma)) : null;
  const longest = Math.min(spanS, flow.isTidal ? spanS : flow.travelS(sourceM, flow.endM));
  const layers = input.loss.kind === 'none' ? 1 : 2;
  const byWork = Math.sqrt((spanS * longest * limits.tubes * layers * input.releases.length) / MOST_WORK);
  const least = Math.max(longest / limits.along, spanS / limits.steps, byWork);
  const wanted = Math.min(spanS / limits.fewest, Math.max(least, sharpest === null ? longest / 600 : sharpest / limits.perSigma)) / refine;
  const steps = Math.ceil(spanS / wanted);
  const stepS = spanS / steps;
  return { stepS, steps, tidalLengthM: Math.max(0.5, stepS * speed), tubes: limits.tubes, perSigma: sharpest === null ? null : sharpest / stepS };
}

/** Places of receptors along a path, m; null where its water does not come. */
export const placesAlong = (flow: PathFlow, receptors: readonly EstimateReceptor[]): (number | null)[] =>
  receptors.map(({ channel }) => (channel ? xOf(flow, channel.reachId, channel.chainageKm) : null));

export function xOf(flow: PathFlow, reachId: string, chainageKm: number): number | null {
  const reach = flow.reaches.find(({ state }) => state.reach.id === reachId);
  return reach ? reach.x0 + (reach.state.reach.centreline[0]![2] - chainageKm) * 1_000 : null;
}
