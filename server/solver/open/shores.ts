import { betweenWalls } from '../physics/two-walls';

/** A straight shore: a point on it, its direction, and the distance of a parallel one across the water, null without. */
export type ShoreFrame = { readonly ex: number; readonly ey: number; readonly x: number; readonly y: number; readonly oppositeM: number | null };

/** Signed distance to the left of a shore's line. */
export const leftOf = ({ ex, ey, x, y }: ShoreFrame, px: number, py: number): number => (py - y) * ex - (px - x) * ey;

/** Direction along the shore such that the water, where (px, py) lies, is to its left. */
export function shoreFrame([ax, ay]: readonly [number, number], [bx, by]: readonly [number, number], px: number, py: number, oppositeM: number | null): ShoreFrame {
  const length = Math.hypot(bx - ax, by - ay);
  const frame = { ex: (bx - ax) / length, ey: (by - ay) / length, x: ax, y: ay, oppositeM };
  return leftOf(frame, px, py) >= 0 ? frame : { ...frame, ex: -frame.ex, ey: -frame.ey };
}

/** Mirror image of a place beyond the shore's line. */
export function mirrored(at: { x: number; y: number }, shore: ShoreFrame): { x: number; y: number } {
  const off = leftOf(shore, at.x, at.y);
  return { x: at.x + 2 * off * shore.ey, y: at.y - 2 * off * shore.ex };
}

/** Variances along and across a shore of a covariance that is in line with it, m2. */
export function alongAcross(shore: ShoreFrame, covariance: Float64Array): { along: number; across: number } {
  const [xx, xy, yy] = [covariance[0]!, covariance[1]!, covariance[2]!];
  const along = shore.ex * shore.ex * xx + 2 * shore.ex * shore.ey * xy + shore.ey * shore.ey * yy;
  return { along, across: xx + yy - along };
}

/**
 * Density between two parallel shores, 1/m2: normal along, between walls across; both exact for a current along them and
 * axes in line with them. (dx, dy) from the centre, `offM` of the centre and `atM` of the place from the first shore.
 * Source: Fischer et al. 1979, section 5.1.3; Carslaw & Jaeger 1959, section 10.5.
 */
export function channelDensity(shore: ShoreFrame, covariance: Float64Array, dx: number, dy: number, offM: number, atM: number): number {
  const { along, across } = alongAcross(shore, covariance);
  const w = shore.oppositeM!;
  const s = dx * shore.ex + dy * shore.ey;
  return ((Math.exp((-s * s) / (2 * along)) / Math.sqrt(2 * Math.PI * along)) * betweenWalls(atM / w, offM / w, across / (2 * w * w))) / w;
}

/** Past this standard deviation across, in widths, the section is even to 3e-7. */
const EVEN_WIDTHS = 1.8;
const WIDE_WIDTHS = 1_000;
/** Images farther than this many standard deviations are not drawn: 1e-7 of a puff's peak. */
const DRAWN_SIGMA = 5.7;

/**
 * Puffs to draw for one between two shores: its images while the section is uneven, then a single one a thousand widths
 * across, which is even between the shores to 5e-7. Gives centres off the first shore, a factor on the amount, and the
 * variance across to be used.
 */
export function drawnImages(widthM: number, offM: number, acrossM2: number): { offsM: number[]; factor: number; acrossM2: number } {
  const sigma = Math.sqrt(acrossM2);
  if (sigma > EVEN_WIDTHS * widthM) {
    const wide = WIDE_WIDTHS * widthM;
    return { offsM: [widthM / 2], factor: (Math.sqrt(2 * Math.PI) * wide) / widthM, acrossM2: wide * wide };
  }
  const most = Math.ceil((DRAWN_SIGMA * sigma) / (2 * widthM)) + 1;
  const offsM: number[] = [];
  for (let n = -most; n <= most; n++)
    for (const image of [2 * n * widthM + offM, 2 * n * widthM - offM]) if (image > -DRAWN_SIGMA * sigma && image < widthM + DRAWN_SIGMA * sigma) offsM.push(image);
  return { offsM, factor: 1, acrossM2 };
}
