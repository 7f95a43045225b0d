import type { Meter } from '../meter';
import { AdaptiveQuadrature, type Triage } from '../math/quadrature';
import { findMaximum } from '../math/roots';
import type { Feature, UnitResponse } from '../types';
import type { NodeResponses } from './node-response';
import { motionFor, Puff, type OpenMotion, type OpenSource } from './puffs';
import type { DepthFactor } from './vertical';

/** Farther than this many standard deviations a puff adds less than 1e-14 of its peak and is left out. */
const FAR_SIGMA = 8;
/** A stretch is wide too where the puffs within it differ more than this in size. */
const MOST_GROWTH = 4;
/** Widest stretch, in standard deviations travelled, that 15 points integrate well; a coarse tolerance takes wider ones. */
const takeSigma = (tolerance: number): number => (tolerance < 1e-5 ? 4 : 6);

/**
 * Concentration at a place against time per kilogram of one release: the puff solution, or for a release that lasts
 * its integral over the time of release, C(t) = integral m'(s) g(x, t; s) ds, by adaptive quadrature to `tolerance`.
 * Stretches of release time whose puffs cannot reach the place are left out by a bound on their motion. With `nodes`
 * a fixed rule takes the place of the adaptive one where it is fine enough.
 */
export function openResponse(anyMotion: OpenMotion, source: OpenSource, x: number, y: number, horizonS: number, tolerance: number, meter: Meter, depth: DepthFactor | null = null, nodes: NodeResponses | null = null): UnitResponse {
  const { profile, capPerKg } = source.release;
  const motion = motionFor(anyMotion, source);
  const puff = new Puff(motion, source, depth);
  const features = passages(motion, source, x, y, horizonS);
  if (profile.isInstant) {
    return {
      features,
      at(tS, withLoss) {
        if (tS <= profile.startS) return 0;
        puff.seen(profile.startS, tS, withLoss);
        meter.count(1);
        return Math.min(capPerKg, puff.at(x, y));
      },
    };
  }
  const quick = depth ? null : nodes?.at(x, y);
  if (quick) return { features, at: (tS, withLoss) => Math.min(capPerKg, quick(tS, withLoss)) };
  const quadrature = new AdaptiveQuadrature(meter);
  const triageAt = triageFor(motion, source, puff, x, y, takeSigma(tolerance));
  const knots = knotsOf(motion, source, horizonS, tolerance);
  return {
    features,
    at(tS, withLoss) {
      if (tS <= profile.startS) return 0;
      const cuts = knots.filter((t) => t < tS);
      cuts.push(Math.min(tS, profile.stopS));
      const integrand = (releasedS: number): number => {
        puff.seen(releasedS, tS, withLoss);
        return profile.rate(releasedS) * puff.at(x, y);
      };
      return Math.min(capPerKg, quadrature.integrate(integrand, cuts, tolerance, triageAt(tS)));
    },
  };
}

/** More kinks than this are left to the adaptive rule where the tolerance is coarse, or where they are only in the current's slope. */
const MANY_KNOTS = 60;

/** Release times at which the integrand is not smooth: kinks of the rate, switches of the loss, kinks of the current. */
function knotsOf(motion: OpenMotion, source: OpenSource, horizonS: number, tolerance: number): number[] {
  const { startS, stopS, knotsS } = source.release.profile;
  const inside = motion.current.kinksS.filter((t) => t > startS && t < stopS);
  const rate = knotsS.length > MANY_KNOTS && tolerance >= 1e-5 ? [startS, stopS] : knotsS;
  const track = (source.track?.knotsS ?? []).filter((t) => t > startS && t < stopS);
  return [...rate, ...track, ...motion.loss.switches(startS, Math.min(stopS, horizonS)), ...(inside.length > MANY_KNOTS ? [] : inside)].sort((a, b) => a - b);
}

/** Bounds how near the puffs released between a and b can come, and how much they differ. */
function triageFor(motion: OpenMotion, source: OpenSource, puff: Puff, x: number, y: number, take: number): (tS: number) => Triage {
  const { spread, current } = motion;
  const start = source.startVarianceM2;
  const trackMps = source.track?.maxSpeedMps ?? 0;
  const { x: x0, y: y0 } = source.origins[0]!;
  const velocity = new Float64Array(2);
  return (tS) => (a, b) => {
    // Over the stretch the speed differs from that in its middle by at most half its length times the acceleration.
    current.velocity((a + b) / 2, velocity);
    const carried = motion.shear ? motion.shear.speedBound(tS - a, x0, y0) : Math.min(current.maxSpeedMps, Math.hypot(velocity[0]!, velocity[1]!) + (current.maxAccelerationMps2 * (b - a)) / 2);
    const travelled = (carried + trackMps) * (b - a);
    const widest = Math.sqrt(start + spread.largest(tS - a));
    puff.seen((a + b) / 2, tS, false);
    if (puff.nearestM(x, y) - travelled / 2 > FAR_SIGMA * widest) return 'skip';
    const narrowest = Math.sqrt(start + spread.smallest(tS - b));
    const growth = Math.sqrt(start + spread.smallest(tS - a)) / narrowest;
    const isNarrow = travelled <= take * narrowest && growth <= MOST_GROWTH;
    if (!isNarrow) return b - a < 1e-6 ? 'take' : 'split';
    // In standard deviations of the puff in the middle: tells more than metres where the puffs are long.
    let least = Infinity;
    for (let image = 0; image < puff.images; image++) least = Math.min(least, puff.distance2(x, y, image));
    return Math.sqrt(least) / growth - travelled / (2 * narrowest) > FAR_SIGMA ? 'skip' : 'take';
  };
}

/** When puffs of this release come nearest to the place, in standard deviations: where its answer rises and falls. */
function passages(motion: OpenMotion, source: OpenSource, x: number, y: number, horizonS: number): Feature[] {
  const { profile } = source.release;
  const out: Feature[] = [];
  const births = profile.isInstant ? [profile.startS] : [0, 0.25, 0.5, 0.75, 1].map((share) => profile.startS + share * (profile.stopS - profile.startS));
  const puff = new Puff(motion, source);
  const velocity = new Float64Array(2);
  for (const birthS of births) {
    if (birthS >= horizonS) continue;
    for (let origin = 0; origin < source.origins.length; origin++) {
      const nearness = (tS: number): number => {
        puff.seen(birthS, tS, false);
        return -puff.distance2(x, y, origin);
      };
      for (const tS of humps(nearness, birthS, horizonS)) {
        // Beyond 12 standard deviations the passage leaves nothing that counts.
        if (nearness(tS) < -144) continue;
        motion.current.velocity(tS, velocity);
        const sigma = Math.sqrt(puff.covariance[0]! + puff.covariance[2]!);
        out.push({ atS: tS, scaleS: Math.min((tS - birthS) / 2, sigma / Math.max(1e-6, Math.hypot(velocity[0]!, velocity[1]!))) });
      }
    }
  }
  return out;
}

/** Local maxima of f on (from, to], found on 240 steps that widen with age and refined. */
function humps(f: (x: number) => number, from: number, to: number): number[] {
  const steps = 240;
  const at = (i: number): number => from + (to - from) * (0.5 * (i / steps) + 0.5 * (i / steps) ** 3);
  const out: number[] = [];
  let before = -Infinity;
  let here = f(at(1));
  for (let i = 2; i <= steps; i++) {
    const next = f(at(i));
    if (here >= before && here >= next) out.push(findMaximum(f, at(i - 2), at(i), 1e-3 * (at(i) - at(i - 2))).x);
    before = here;
    here = next;
  }
  if (here > before) out.push(to);
  return out;
}
