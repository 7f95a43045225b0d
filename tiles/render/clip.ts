import type { Box } from './mercator';

/**
 * Clips a closed ring (flat x, y pairs, first position not repeated) to a box, Sutherland and Hodgman 1974.
 * Edges along the box may double back on themselves; with a box a little larger than the tile that is never seen.
 */
export function clipRing(ring: ArrayLike<number>, box: Box): number[] {
  let input: ArrayLike<number> = ring;
  for (let side = 0; side < 4; side++) {
    const output: number[] = [];
    const axis = side & 1;
    const limit = side === 0 ? box.minX : side === 1 ? box.minY : side === 2 ? box.maxX : box.maxY;
    const isIn = side < 2 ? (v: number) => v >= limit : (v: number) => v <= limit;
    const n = input.length;
    for (let i = 0; i < n; i += 2) {
      const j = i === 0 ? n - 2 : i - 2;
      const here = isIn(input[i + axis]!);
      if (here !== isIn(input[j + axis]!)) {
        const t = (limit - input[j + axis]!) / (input[i + axis]! - input[j + axis]!);
        output.push(input[j]! + t * (input[i]! - input[j]!), input[j + 1]! + t * (input[i + 1]! - input[j + 1]!));
      }
      if (here) output.push(input[i]!, input[i + 1]!);
    }
    if (output.length === 0) return output;
    input = output;
  }
  return Array.from(input);
}

/** Parts of a line whose segments touch the box; segments are kept whole so that dashes and joins run on. */
export function clipLine(line: ArrayLike<number>, box: Box): number[][] {
  const parts: number[][] = [];
  let part: number[] = [];
  for (let i = 2; i < line.length; i += 2) {
    const [ax, ay, bx, by] = [line[i - 2]!, line[i - 1]!, line[i]!, line[i + 1]!];
    const misses = Math.max(ax, bx) < box.minX || Math.min(ax, bx) > box.maxX || Math.max(ay, by) < box.minY || Math.min(ay, by) > box.maxY;
    if (misses) {
      if (part.length) parts.push(part);
      part = [];
    } else {
      if (part.length === 0) part.push(ax, ay);
      part.push(bx, by);
    }
  }
  if (part.length) parts.push(part);
  return parts;
}

/** Drops vertices nearer than `tolerance` to the last kept one and, by Douglas-Peucker, those that do not bend the line. */
export function simplifyFlat(line: ArrayLike<number>, tolerance: number): Float64Array {
  const n = line.length / 2;
  if (n < 3) return Float64Array.from(line);
  const keep = new Uint8Array(n);
  keep[0] = keep[n - 1] = 1;
  const stack = [0, n - 1];
  const limit = tolerance * tolerance;
  while (stack.length) {
    const last = stack.pop()!;
    const first = stack.pop()!;
    const [ax, ay] = [line[2 * first]!, line[2 * first + 1]!];
    const [dx, dy] = [line[2 * last]! - ax, line[2 * last + 1]! - ay];
    const length2 = dx * dx + dy * dy;
    let worst = limit;
    let at = -1;
    for (let i = first + 1; i < last; i++) {
      const [px, py] = [line[2 * i]! - ax, line[2 * i + 1]! - ay];
      const t = length2 === 0 ? 0 : Math.min(1, Math.max(0, (px * dx + py * dy) / length2));
      const off = (px - t * dx) ** 2 + (py - t * dy) ** 2;
      if (off > worst) [worst, at] = [off, i];
    }
    if (at > 0) {
      keep[at] = 1;
      stack.push(first, at, at, last);
    }
  }
  const out: number[] = [];
  for (let i = 0; i < n; i++) if (keep[i]) out.push(line[2 * i]!, line[2 * i + 1]!);
  return Float64Array.from(out);
}
