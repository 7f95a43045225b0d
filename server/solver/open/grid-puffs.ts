import { gaussLegendre } from '../math/quadrature';
import { motionFor, Puff, type OpenMotion, type OpenSource } from './puffs';
import { alongAcross, drawnImages, leftOf } from './shores';

/** Puffs whose sum stands for a release at one time: centre (m), covariance (m2), and kg/m that is mass over depth. */
export type PuffList = { x: number[]; y: number[]; sxx: number[]; sxy: number[]; syy: number[]; amount: number[] };

const emptyList = (): PuffList => ({ x: [], y: [], sxx: [], sxy: [], syy: [], amount: [] });

/** Points per stretch of `STRETCH` standard deviations travelled: 1.5 and more each reach 1e-6 of the peak. */
const STRETCH = 4;
const POINTS = gaussLegendre(8);
const MAX_STRETCHES = 60;

/**
 * Puffs of one release at time t, scaled by `weight` (kg). A release that lasts is cut into stretches of equal travel
 * in units of the puff's own size, with eight Gauss-Legendre points each; sizes below `smallestSigmaM` count as that,
 * because a grid cannot show them. The amounts are scaled so that they add up to what has been released.
 */
export function gridPuffs(anyMotion: OpenMotion, source: OpenSource, tS: number, weight: number, smallestSigmaM: number, withLoss: boolean): PuffList {
  const motion = motionFor(anyMotion, source);
  const list = emptyList();
  const { profile } = source.release;
  if (tS <= profile.startS || weight === 0) return list;
  const puff = new Puff(motion, source);
  const add = (releasedS: number, share: number): void => {
    puff.seen(releasedS, tS, withLoss);
    const [sxx, sxy, syy] = puff.covariance;
    const amount = (share * weight * puff.survival) / motion.mixingDepthM;
    if (typeof motion.shore?.oppositeM === 'number') return addBetweenShores(list, motion, puff, amount);
    for (let image = 0; image < puff.images; image++) {
      const { x, y } = puff.centre(image);
      push(list, x, y, sxx!, sxy!, syy!, amount);
    }
  };
  if (profile.isInstant) {
    add(profile.startS, 1);
    return list;
  }
  const edges = stretchEdges(motion, source, tS, smallestSigmaM);
  const times: number[] = [];
  const shares: number[] = [];
  let sum = 0;
  for (let i = 1; i < edges.length; i++) {
    const mid = (edges[i]! + edges[i - 1]!) / 2;
    const half = (edges[i]! - edges[i - 1]!) / 2;
    for (let k = 0; k < POINTS.x.length; k++) {
      const at = mid + half * POINTS.x[k]!;
      const share = half * POINTS.w[k]! * profile.rate(at);
      if (share <= 0) continue;
      times.push(at);
      shares.push(share);
      sum += share;
    }
  }
  const scale = profile.released(tS) / (sum || 1);
  times.forEach((at, i) => add(at, shares[i]! * scale));
  return list;
}

const push = (list: PuffList, x: number, y: number, sxx: number, sxy: number, syy: number, amount: number): void => {
  list.x.push(x);
  list.y.push(y);
  list.sxx.push(sxx);
  list.sxy.push(sxy);
  list.syy.push(syy);
  list.amount.push(amount);
};

function addBetweenShores(list: PuffList, { shore }: OpenMotion, puff: Puff, amount: number): void {
  const { ex, ey, oppositeM } = shore!;
  const { along, across } = alongAcross(shore!, puff.covariance);
  const { x, y } = puff.centre(0);
  const offM = leftOf(shore!, x, y);
  const drawn = drawnImages(oppositeM!, offM, across);
  const [sxx, sxy, syy] = [along * ex * ex + drawn.acrossM2 * ey * ey, (along - drawn.acrossM2) * ex * ey, along * ey * ey + drawn.acrossM2 * ex * ex];
  for (const imageM of drawn.offsM) push(list, x - (imageM - offM) * ey, y + (imageM - offM) * ex, sxx, sxy, syy, amount * drawn.factor);
}

/** Release times between which a puff travels `STRETCH` of its own standard deviations or doubles its size. */
function stretchEdges(motion: OpenMotion, source: OpenSource, tS: number, smallestSigmaM: number): number[] {
  const { profile } = source.release;
  const stop = Math.min(tS, profile.stopS);
  const steps = 240;
  const velocity = new Float64Array(2);
  const size = (ageS: number): number => Math.max(smallestSigmaM, Math.sqrt(source.startVarianceM2 + motion.spread.smallest(ageS)));
  const sums = new Float64Array(steps + 1);
  for (let i = 0; i < steps; i++) {
    const at = profile.startS + ((stop - profile.startS) * (i + 0.5)) / steps;
    const h = (stop - profile.startS) / steps;
    motion.current.velocity(at, velocity);
    const { x, y } = source.origins[0]!;
    const speed = (motion.shear ? motion.shear.speedBound(tS - at, x, y) : Math.hypot(velocity[0]!, velocity[1]!)) + (source.track?.maxSpeedMps ?? 0);
    const travel = (speed * h) / size(tS - at);
    const growth = Math.log(size(tS - at + h / 2) / size(tS - at - h / 2)) * STRETCH;
    sums[i + 1] = sums[i]! + travel + growth / Math.LN2;
  }
  const n = Math.min(MAX_STRETCHES, Math.max(1, Math.ceil(sums[steps]! / STRETCH)));
  const edges = [profile.startS];
  let i = 0;
  for (let k = 1; k < n; k++) {
    const wanted = (sums[steps]! * k) / n;
    while (i < steps - 1 && sums[i + 1]! < wanted) i++;
    const share = (wanted - sums[i]!) / (sums[i + 1]! - sums[i]! || 1);
    edges.push(profile.startS + ((stop - profile.startS) * (i + share)) / steps);
  }
  edges.push(stop);
  return edges;
}
