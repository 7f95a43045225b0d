import type { LonLat } from './schemas/basics';

/** Flat x, y pairs. */
type Flat = readonly number[];

/**
 * The vertices of a line that may not be left out: what is left out lies no farther than `tolerance` from what stays.
 * First and last vertex stay. Source: Douglas & Peucker 1973, Cartographica 10(2).
 */
export function simplifyLine(line: Flat, tolerance: number): number[] {
  const n = line.length / 2;
  if (n < 3) return [...line];
  const keep = new Uint8Array(n);
  keep[0] = keep[n - 1] = 1;
  const spans: [number, number][] = [[0, n - 1]];
  for (let span = spans.pop(); span; span = spans.pop()) {
    const [from, to] = span;
    const { index, distance } = farthest(line, from, to);
    if (distance <= tolerance) continue;
    keep[index] = 1;
    spans.push([from, index], [index, to]);
  }
  const out: number[] = [];
  for (let k = 0; k < n; k++) if (keep[k]) out.push(line[2 * k]!, line[2 * k + 1]!);
  return out;
}

/** A closed ring (its first vertex not repeated), held at its first vertex and at the one farthest from it. */
export function simplifyRing(ring: Flat, tolerance: number): number[] {
  let [most, at] = [0, 0];
  for (let k = 1; 2 * k < ring.length; k++) {
    const distance = Math.hypot(ring[2 * k]! - ring[0]!, ring[2 * k + 1]! - ring[1]!);
    if (distance > most) [most, at] = [distance, k];
  }
  if (at === 0) return [];
  const there = simplifyLine(ring.slice(0, 2 * at + 2), tolerance);
  const back = simplifyLine([...ring.slice(2 * at), ring[0]!, ring[1]!], tolerance);
  return [...there.slice(0, -2), ...back.slice(0, -2)];
}

function farthest(line: Flat, from: number, to: number): { index: number; distance: number } {
  const [ax, ay] = [line[2 * from]!, line[2 * from + 1]!];
  const [ux, uy] = [line[2 * to]! - ax, line[2 * to + 1]! - ay];
  const length2 = ux * ux + uy * uy;
  let index = from;
  let distance = -1;
  for (let k = from + 1; k < to; k++) {
    const [px, py] = [line[2 * k]! - ax, line[2 * k + 1]! - ay];
    const along = length2 === 0 ? 0 : Math.min(1, Math.max(0, (px * ux + py * uy) / length2));
    const off = Math.hypot(px - along * ux, py - along * uy);
    if (off > distance) [index, distance] = [k, off];
  }
  return { index, distance };
}

/** Five decimals of a degree: about a metre. */
export const roundLonLat = ([lon, lat]: LonLat): LonLat => [fiveDecimals(lon), fiveDecimals(lat)];

/** Plus nothing, so that a small negative number does not become minus zero. */
const fiveDecimals = (degrees: number): number => Number(degrees.toFixed(5)) + 0;
