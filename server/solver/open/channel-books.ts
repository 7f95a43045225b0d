import type { Weights } from '../release-profile';
import { isInPlaneArea } from './area-mask';
import { gridPuffs, type PuffList } from './grid-puffs';
import type { OpenGridding } from './open-grid';
import type { ShoreFrame } from './shores';

const NODES_ALONG = 120;
const NODES_ACROSS = 24;
/** A normal curve this many cells wide sums to one within 2 exp(-2 pi^2 0.49) = 1.3e-4. */
const LEAST_CELLS = 0.7;

type Frame = { fromM: number; stepM: number; acrossM: number };

/**
 * Amount between two shores and the part of it over land, by the midpoint rule on nodes in line with the shores. Across, the
 * sum repeats itself beyond both shores (images), so that the rule loses nothing to the walls; along, the cloud ends freely.
 */
export function massBetweenShores(gridding: OpenGridding, shore: ShoreFrame, weights: Weights, tS: number): { all: number; overLand: number } {
  const { motion, sources, area } = gridding;
  const widthM = shore.oppositeM!;
  const acrossM = widthM / NODES_ACROSS;
  const lists = sources.map((source) => gridPuffs(motion, source, tS, weights[source.release.index]!, LEAST_CELLS * acrossM, gridding.withLoss));
  const spans = lists.flatMap((list) => list.x.map((_, i) => figures(list, i, shore))).map(({ s, along }) => [s - 6 * Math.sqrt(along), s + 6 * Math.sqrt(along)] as const);
  if (spans.length === 0) return { all: 0, overLand: 0 };
  const fromM = spans.reduce((least, [a]) => Math.min(least, a), Infinity);
  const toM = spans.reduce((most, [, b]) => Math.max(most, b), -Infinity);
  const frame: Frame = { fromM, stepM: (toM - fromM) / NODES_ALONG, acrossM };
  const sums = new Float64Array(NODES_ALONG * NODES_ACROSS);
  for (const list of lists) addTo(sums, list, shore, frame);
  let [all, overLand] = [0, 0];
  for (let j = 0; j < NODES_ACROSS; j++)
    for (let i = 0; i < NODES_ALONG; i++) {
      const amount = sums[j * NODES_ALONG + i]! * frame.stepM * acrossM * motion.mixingDepthM;
      const [s, n] = [fromM + (i + 0.5) * frame.stepM, (j + 0.5) * acrossM];
      all += amount;
      if (amount > 0 && !isInPlaneArea(area, shore.x + s * shore.ex - n * shore.ey, shore.y + s * shore.ey + n * shore.ex)) overLand += amount;
    }
  return { all, overLand };
}

/** Place along and off the shore of one drawn puff, and its variances. */
function figures(list: PuffList, i: number, { x, y, ex, ey }: ShoreFrame): { s: number; n: number; along: number; across: number } {
  const [dx, dy] = [list.x[i]! - x, list.y[i]! - y];
  const along = ex * ex * list.sxx[i]! + 2 * ex * ey * list.sxy[i]! + ey * ey * list.syy[i]!;
  return { s: dx * ex + dy * ey, n: dy * ex - dx * ey, along, across: list.sxx[i]! + list.syy[i]! - along };
}

function addTo(sums: Float64Array, list: PuffList, shore: ShoreFrame, { fromM, stepM, acrossM }: Frame): void {
  const row = new Float64Array(NODES_ALONG);
  for (let p = 0; p < list.x.length; p++) {
    const { s, n, along, across } = figures(list, p, shore);
    const alongVariance = Math.max(along, (LEAST_CELLS * stepM) ** 2);
    const acrossVariance = Math.max(across, (LEAST_CELLS * acrossM) ** 2);
    const peak = list.amount[p]! / (2 * Math.PI * Math.sqrt(alongVariance * acrossVariance));
    for (let i = 0; i < NODES_ALONG; i++) row[i] = peak * Math.exp(-((fromM + (i + 0.5) * stepM - s) ** 2) / (2 * alongVariance));
    for (let j = 0; j < NODES_ACROSS; j++) {
      const share = Math.exp(-(((j + 0.5) * acrossM - n) ** 2) / (2 * acrossVariance));
      if (share < 1e-12) continue;
      for (let i = 0; i < NODES_ALONG; i++) sums[j * NODES_ALONG + i]! += share * row[i]!;
    }
  }
}
