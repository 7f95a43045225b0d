/** One share of a tensor: `weight` m2/s along the step (a, b) in cells. */
export type LatticeShare = { readonly a: number; readonly b: number; readonly weight: number };

/** Longest step in cells: a longer one would reach past the shore's detail. */
export const LONGEST_STEP = 4;
/** By so much the smaller coefficient is raised at a time where the grid cannot hold the difference of the two. */
const RAISE = 1.25;

/**
 * Splits a symmetric positive tensor into at most three spreads along whole steps of the grid, none negative:
 * K = sum of weight * e e^T. On the grid each is an exchange between two cells, so that cross terms can neither make a
 * value negative nor a new extreme. Exact for any tensor; `steps` keep to LONGEST_STEP cells, else the smaller principal
 * coefficient is raised until they do (a difference of more than about 20 times at an unlucky angle).
 * Source: Selling 1874, J. reine angew. Math. 77:143; as a scheme for spreading, Fehrenbach & Mirebeau 2014, J. Math.
 * Imaging Vis. 49:123.
 */
export function latticeShares(xx: number, xy: number, yy: number): LatticeShare[] {
  for (let most = 0; ; most++) {
    const shares = selling(xx, xy, yy);
    if (most > 40 || shares.every(({ a, b }) => Math.max(Math.abs(a), Math.abs(b)) <= LONGEST_STEP)) return shares;
    const mean = (xx + yy) / 2;
    const half = Math.hypot((xx - yy) / 2, xy);
    const smaller = (mean - half) * RAISE;
    // The larger principal coefficient and both axes stay; only the smaller is raised.
    const halfNow = (mean + half - smaller) / 2;
    const meanNow = (mean + half + smaller) / 2;
    [xx, xy, yy] = [meanNow + ((xx - yy) / 2) * (halfNow / half), xy * (halfNow / half), meanNow - ((xx - yy) / 2) * (halfNow / half)];
  }
}

type Step = readonly [number, number];
/** Two vectors of a base of three, and the third. */
const PAIRS = [[0, 1, 2], [1, 2, 0], [0, 2, 1]] as const;

function selling(xx: number, xy: number, yy: number): LatticeShare[] {
  const e: [Step, Step, Step] = [[1, 0], [0, 1], [-1, -1]];
  const product = ([a, b]: Step, [c, d]: Step): number => xx * a * c + xy * (a * d + b * c) + yy * b * d;
  const small = 1e-14 * (xx + yy);
  for (let round = 0; round < 200; round++) {
    const pair = PAIRS.find(([i, j]) => product(e[i], e[j]) > small);
    if (!pair) break;
    const [p, q] = [e[pair[0]], e[pair[1]]];
    e[0] = [-p[0], -p[1]];
    e[1] = q;
    e[2] = [p[0] - q[0], p[1] - q[1]];
  }
  const out: LatticeShare[] = [];
  for (const [i, j, k] of PAIRS) {
    const weight = -product(e[i], e[j]);
    if (weight <= small) continue;
    // At right angles to the third vector; one of the two opposite steps stands for both.
    const [a, b] = [-e[k][1], e[k][0]];
    const sign = a < 0 || (a === 0 && b < 0) ? -1 : 1;
    out.push({ a: sign * a + 0, b: sign * b + 0, weight });
  }
  return out;
}
