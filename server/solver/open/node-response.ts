import type { Meter } from '../meter';
import { gaussLegendre } from '../math/quadrature';
import type { OpenMotion, OpenSource } from './puffs';

/** Eight points for every nine standard deviations that a puff travels: about 1e-4 of the peak. */
const POINTS = gaussLegendre(8);
const STRETCH_SIGMA = 9;
/** Within a stretch a puff's age grows by no more than this times the youngest age that can matter. */
const MOST_AGEING = 3;
/** More nodes than this are not worth keeping. */
const MOST_NODES = 1_600;
/** Farther than this many standard deviations a puff adds less than 4e-6 of its peak and is left out. */
const FAR_SIGMA = 5;

/** Release times with all that does not depend on place or time of the answer. */
type Nodes = { bornS: Float64Array; share: Float64Array; x: Float64Array; y: Float64Array; first: Float64Array; second: Float64Array; exposure: Float64Array };

/**
 * Answers of many places to one lasting release by a fixed rule in release time, for previews. Puffs too young to have
 * come as near as the place add nothing there, so the width of the youngest that can bounds the stretches; nodes
 * serve every place of the same width. Error about 1e-4 of the peak where the rate is smooth on the scale of a puff.
 */
export class NodeResponses {
  private readonly sets = new Map<number, Nodes>();
  private readonly now = new Float64Array(2);
  private readonly sums = new Float64Array(2);
  private readonly covariance = new Float64Array(3);

  constructor(
    private readonly motion: OpenMotion,
    private readonly source: OpenSource,
    private readonly horizonS: number,
    private readonly meter: Meter,
  ) {}

  /** True for a current alike everywhere, a release that stays and shores met by a single mirror image. */
  static fits(motion: OpenMotion, source: OpenSource): boolean {
    return !motion.shear && !source.track && typeof motion.shore?.oppositeM !== 'number' && !source.release.profile.isInstant;
  }

  /** The answer at a place, 1/m3 per kilogram; null where too many nodes would be needed. */
  at(x: number, y: number): ((tS: number, withLoss: boolean) => number) | null {
    const { profile } = this.source.release;
    const youngestS = this.youngestAge(x, y);
    if (youngestS === null) return () => 0;
    const nodes = this.nodesFor(youngestS);
    return nodes && ((tS, withLoss) => (tS <= profile.startS ? 0 : this.sum(nodes, x, y, tS, withLoss)));
  }

  /** No puff younger than this comes within `FAR_SIGMA` of the place; null where none does within the estimate. */
  private youngestAge(x: number, y: number): number | null {
    const { motion, source, horizonS } = this;
    const distance = Math.min(...source.origins.map((origin) => Math.hypot(x - origin.x, y - origin.y)));
    const isFar = (ageS: number): boolean => motion.current.maxSpeedMps * ageS + FAR_SIGMA * Math.sqrt(source.startVarianceM2 + motion.spread.largest(ageS)) < distance;
    let [low, high] = [0, horizonS - source.release.profile.startS];
    if (isFar(high)) return null;
    for (let i = 0; i < 30; i++) {
      const mid = (low + high) / 2;
      if (isFar(mid)) low = mid;
      else high = mid;
    }
    return low;
  }

  private nodesFor(youngestS: number): Nodes | null {
    const { motion, source } = this;
    const { startS, stopS } = source.release.profile;
    const sigma = Math.sqrt(source.startVarianceM2 + motion.spread.smallest(youngestS));
    const stretchS = Math.min((STRETCH_SIGMA * sigma) / Math.max(motion.current.maxSpeedMps, 1e-9), MOST_AGEING * Math.max(youngestS, 1));
    // Rounded up to quarter powers of two, so that places alike share their nodes.
    const count = Math.ceil(2 ** (Math.ceil(4 * Math.log2(Math.max(1, (stopS - startS) / stretchS))) / 4));
    if (count * POINTS.x.length > MOST_NODES) return null;
    const known = this.sets.get(count);
    if (known) return known;
    const nodes = this.makeNodes(count);
    this.sets.set(count, nodes);
    return nodes;
  }

  private makeNodes(count: number): Nodes {
    const { motion, source } = this;
    const { profile } = source.release;
    const per = POINTS.x.length;
    const list = (): Float64Array => new Float64Array(count * per);
    const nodes: Nodes = { bornS: list(), share: list(), x: list(), y: list(), first: list(), second: list(), exposure: list() };
    const lengthS = (profile.stopS - profile.startS) / count;
    const out = new Float64Array(2);
    for (let i = 0; i < count; i++) {
      const from = profile.startS + i * lengthS;
      let sum = 0;
      for (let k = 0; k < per; k++) {
        const n = i * per + k;
        const bornS = from + (lengthS * (1 + POINTS.x[k]!)) / 2;
        nodes.bornS[n] = bornS;
        nodes.share[n] = (lengthS / 2) * POINTS.w[k]! * profile.rate(bornS);
        sum += nodes.share[n]!;
        motion.current.displacement(bornS, out);
        nodes.x[n] = out[0]!;
        nodes.y[n] = out[1]!;
        motion.spread.running?.at(bornS, out);
        nodes.first[n] = out[0]!;
        nodes.second[n] = out[1]!;
        nodes.exposure[n] = motion.loss.exposure(bornS);
      }
      // Kinks within a stretch do not change what it releases.
      const scale = (profile.released(from + lengthS) - profile.released(from)) / (sum || 1);
      for (let n = i * per; n < (i + 1) * per; n++) nodes.share[n]! *= scale;
    }
    return nodes;
  }

  private sum(nodes: Nodes, x: number, y: number, tS: number, withLoss: boolean): number {
    const { motion, source, now, sums, covariance } = this;
    const { spread } = motion;
    motion.current.displacement(tS, now);
    spread.running?.at(tS, sums);
    const exposure = motion.loss.exposure(tS);
    let total = 0;
    let n = 0;
    for (; n < nodes.bornS.length && nodes.bornS[n]! < tS; n++) {
      const ageS = tS - nodes.bornS[n]!;
      const dx = x - now[0]! + nodes.x[n]!;
      const dy = y - now[1]! + nodes.y[n]!;
      const reach2 = FAR_SIGMA * FAR_SIGMA * (source.startVarianceM2 + spread.largest(ageS));
      let isNear = false;
      for (const { x: ox, y: oy } of source.origins) isNear ||= (dx - ox) ** 2 + (dy - oy) ** 2 < reach2;
      if (!isNear) continue;
      if (spread.running) spread.running.gained(ageS, sums[0]! - nodes.first[n]!, sums[1]! - nodes.second[n]!, covariance);
      else spread.gained(nodes.bornS[n]!, tS, covariance);
      const sxx = covariance[0]! + source.startVarianceM2;
      const syy = covariance[2]! + source.startVarianceM2;
      const sxy = covariance[1]!;
      const det = sxx * syy - sxy * sxy;
      let value = 0;
      for (const { x: ox, y: oy } of source.origins) {
        const [ex, ey] = [dx - ox, dy - oy];
        value += Math.exp((-0.5 * (syy * ex * ex - 2 * sxy * ex * ey + sxx * ey * ey)) / det);
      }
      total += ((nodes.share[n]! * value) / Math.sqrt(det)) * (withLoss ? Math.exp(nodes.exposure[n]! - exposure) : 1);
    }
    this.meter.count(n);
    return total / (2 * Math.PI * motion.mixingDepthM);
  }
}
