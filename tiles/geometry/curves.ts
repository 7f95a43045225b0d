import { fromPlane, toPlane, type LocalPlane } from '../../shared/geo';
import type { Point } from '../district-points';
import { noise2 } from './noise';

/** Metres east and north of the middle of the district. */
export type Xy = [x: number, y: number];
export const plane: LocalPlane = { originLon: -117.1, originLat: -44.5 };
export const toXy = (point: readonly number[]): Xy => toPlane(plane, [point[0]!, point[1]!]);
export const toLonLat = ([x, y]: Xy): Point => fromPlane(plane, x, y);

const distance = (a: Xy, b: Xy) => Math.hypot(b[0] - a[0], b[1] - a[1]);

/** Position on the centripetal Catmull-Rom span from `b` to `c`, u in [0, 1]; a and d are the neighbours. */
function catmullRom(a: Xy, b: Xy, c: Xy, d: Xy, u: number): Xy {
  const knot = (p: Xy, q: Xy) => Math.max(1e-6, Math.sqrt(distance(p, q)));
  const t1 = knot(a, b);
  const t2 = t1 + knot(b, c);
  const t3 = t2 + knot(c, d);
  const t = t1 + u * (t2 - t1);
  const mix = (p: Xy, q: Xy, from: number, to: number): Xy => {
    const w = (t - from) / (to - from);
    return [p[0] + w * (q[0] - p[0]), p[1] + w * (q[1] - p[1])];
  };
  const ab = mix(a, b, 0, t1);
  const bc = mix(b, c, t1, t2);
  const cd = mix(c, d, t2, t3);
  return mix(mix(ab, bc, 0, t2), mix(bc, cd, t1, t3), t1, t2);
}

/** Smooth curve through the points, one sample about every `stepM`; returns one array per span, ends included. */
export function smoothSpans(points: readonly Xy[], stepM: number, isClosed = false): Xy[][] {
  const n = points.length;
  const at = (i: number): Xy => {
    if (isClosed) return points[(i + n) % n]!;
    if (i < 0) return [2 * points[0]![0] - points[1]![0], 2 * points[0]![1] - points[1]![1]];
    if (i >= n) return [2 * points[n - 1]![0] - points[n - 2]![0], 2 * points[n - 1]![1] - points[n - 2]![1]];
    return points[i]!;
  };
  const spans: Xy[][] = [];
  for (let i = 0; i < (isClosed ? n : n - 1); i++) {
    const count = Math.max(2, Math.ceil(distance(at(i), at(i + 1)) / stepM));
    const span: Xy[] = [];
    for (let k = 0; k <= count; k++) span.push(k === 0 ? at(i) : k === count ? at(i + 1) : catmullRom(at(i - 1), at(i), at(i + 1), at(i + 2), k / count));
    spans.push(span);
  }
  return spans;
}

/** Spans joined into one line, shared ends once. */
export const joinSpans = (spans: readonly Xy[][]): Xy[] => spans.flatMap((span, i) => (i === 0 ? span : span.slice(1)));
export const smoothLine = (points: readonly Xy[], stepM: number): Xy[] => joinSpans(smoothSpans(points, stepM));

/** Unit normals to the left of a line's direction, one for each vertex. */
export function leftNormals(line: readonly Xy[]): Xy[] {
  return line.map((_, i) => {
    const a = line[Math.max(0, i - 1)]!;
    const b = line[Math.min(line.length - 1, i + 1)]!;
    const length = distance(a, b) || 1;
    return [-(b[1] - a[1]) / length, (b[0] - a[0]) / length];
  });
}

export function cumulative(line: readonly Xy[]): number[] {
  const sums = [0];
  for (let i = 1; i < line.length; i++) sums.push(sums[i - 1]! + distance(line[i - 1]!, line[i]!));
  return sums;
}

export type Meander = { amplitudeM: number; wavelengthM: number; seed: number };

/** Swings each span from side to side so that it still starts and ends where it did and joins its neighbours smoothly. */
export function meanderSpans(spans: readonly Xy[][], { amplitudeM, wavelengthM, seed }: Meander): Xy[][] {
  let sign = 1;
  let start = 0;
  return spans.map((span) => {
    const along = cumulative(span);
    const length = along[along.length - 1]!;
    const halfWaves = Math.max(1, Math.round((2 * length) / wavelengthM));
    const amplitude = Math.min(amplitudeM, (0.16 * length) / halfWaves);
    const normals = leftNormals(span);
    const swung = span.map((point, i): Xy => {
      const s = along[i]!;
      const phase = (Math.PI * halfWaves * s) / length;
      const strength = 0.45 + 1.1 * noise2((start + s) / (1.3 * wavelengthM), 0.5, seed);
      const fine = 0.28 * (noise2((start + s) / (0.9 * wavelengthM), 9.5, seed) - 0.35);
      const offset = i === 0 || i === span.length - 1 ? 0 : amplitude * (sign * strength * Math.sin(phase) + fine * Math.sin(2 * phase));
      return [point[0] + normals[i]![0] * offset, point[1] + normals[i]![1] * offset];
    });
    if (halfWaves % 2 === 1) sign = -sign;
    start += length;
    return swung;
  });
}

/** Roughens a span with noise of several sizes that dies out at both ends; roughness 0 to 1. */
export function roughenSpan(span: readonly Xy[], roughness: number, largestM: number, seed: number): Xy[] {
  const along = cumulative(span);
  const length = along[along.length - 1]!;
  const normals = leftNormals(span);
  return span.map((point, i) => {
    const s = along[i]!;
    const fade = Math.min(1, s / (0.18 * length), (length - s) / (0.18 * length));
    let offset = 0;
    let weight = 1;
    for (let sizeM = Math.min(largestM, 0.7 * length); sizeM > 60; sizeM /= 2) {
      offset += weight * 0.62 * sizeM * (noise2(point[0] / sizeM, point[1] / sizeM, seed + Math.round(sizeM)) - 0.5);
      weight *= 0.84;
    }
    const shift = i === 0 || i === span.length - 1 ? 0 : offset * roughness * Math.max(0, fade);
    return [point[0] + normals[i]![0] * shift, point[1] + normals[i]![1] * shift];
  });
}

/** Douglas-Peucker: indices kept so that no dropped vertex lies further than `toleranceM` from the thinned line. */
export function thinIndices(line: readonly Xy[], toleranceM: number): number[] {
  const keep = new Uint8Array(line.length);
  keep[0] = 1;
  keep[line.length - 1] = 1;
  const stack: [number, number][] = [[0, line.length - 1]];
  for (let range = stack.pop(); range; range = stack.pop()) {
    const [first, last] = range;
    const [ax, ay] = line[first]!;
    const dx = line[last]![0] - ax;
    const dy = line[last]![1] - ay;
    const length2 = dx * dx + dy * dy;
    let worst = 0;
    let at = -1;
    for (let i = first + 1; i < last; i++) {
      const px = line[i]![0] - ax;
      const py = line[i]![1] - ay;
      const t = length2 === 0 ? 0 : Math.min(1, Math.max(0, (px * dx + py * dy) / length2));
      const off = Math.hypot(px - t * dx, py - t * dy);
      if (off > worst) [worst, at] = [off, i];
    }
    if (worst > toleranceM && at > 0) {
      keep[at] = 1;
      stack.push([first, at], [at, last]);
    }
  }
  return Array.from(keep.keys()).filter((i) => keep[i] === 1);
}
export const thin = (line: readonly Xy[], toleranceM: number): Xy[] => thinIndices(line, toleranceM).map((i) => line[i]!);

/** Closed ring: thinned in two halves so that its first vertex stays. */
export function thinRing(ring: readonly Xy[], toleranceM: number): Xy[] {
  const half = Math.floor(ring.length / 2);
  return [...thin(ring.slice(0, half + 1), toleranceM), ...thin(ring.slice(half), toleranceM).slice(1)];
}

/** Shoelace area of a closed ring, m2. */
export const ringAreaM2 = (ring: readonly Xy[]): number =>
  Math.abs(ring.reduce((sum, [x, y], i) => { const [nx, ny] = ring[(i + 1) % ring.length]!; return sum + x * ny - nx * y; }, 0) / 2);

export function isInside([x, y]: Xy, ring: readonly Xy[]): boolean {
  let inside = false;
  for (let i = 0, j = ring.length - 1; i < ring.length; j = i++) {
    const [ax, ay] = ring[i]!;
    const [bx, by] = ring[j]!;
    if (ay > y !== by > y && x < ((bx - ax) * (y - ay)) / (by - ay) + ax) inside = !inside;
  }
  return inside;
}

/** One round of corner cutting (Chaikin 1974) on a closed ring. */
export const cutCorners = (ring: readonly Xy[]): Xy[] =>
  ring.flatMap(([x, y], i): Xy[] => {
    const [nx, ny] = ring[(i + 1) % ring.length]!;
    return [[0.75 * x + 0.25 * nx, 0.75 * y + 0.25 * ny], [0.25 * x + 0.75 * nx, 0.25 * y + 0.75 * ny]];
  });
