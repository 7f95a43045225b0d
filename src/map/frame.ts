import { decodeValue, NO_ESTIMATE, nodeCount, type EnvelopeHead, type FrameHead, type FrameScale } from '../../shared/frames';
import type { Level } from '../../shared/schemas/estimate-result';

/** Codes over a grid, as they come from the stream (shared/frames.ts). */
export type Frame = { head: FrameHead | EnvelopeHead; codes: Uint16Array };

/** The place of a concentration on the frame's logarithmic scale, not rounded: codes are linear in its logarithm. */
export const codeOfLevel = (value: number, scale: FrameScale): number =>
  1 + (Math.log(value / scale.floor) / Math.log(scale.top / scale.floor)) * 65_533;

/** Concentration of a code that may lie between two whole ones; 0 below the floor. */
export const valueOfCode = (code: number, scale: FrameScale): number => (code < 1 ? 0 : decodeValue(code, scale));

/** Levels that can be drawn, lowest first, each value once; an action value wins over a plain level of the same value. */
export function drawnLevels(levels: readonly Level[]): Level[] {
  const byValue = new Map<number, Level>();
  for (const level of levels) if (level.value > 0 && (level.isActionValue || !byValue.has(level.value))) byValue.set(level.value, level);
  return [...byValue.values()].sort((a, b) => a.value - b.value);
}

export function assertWholeFrame({ head, codes }: Frame): void {
  const nodes = nodeCount(head.grid);
  if (codes.length !== nodes) throw new RangeError(`A frame has ${codes.length} values where its grid has ${nodes} nodes`);
}

/**
 * Codes in which nodes without a value of their own (no estimate, or on land) carry the mean of their neighbours, so
 * that isolines run straight up to the shore or the hatched part instead of closing in front of it. The very array
 * when every node has its value.
 *
 * @param dry 1 for nodes on land; null when none is
 */
export function bridgedCodes(codes: Uint16Array, nx: number, ny: number, dry: Uint8Array | null = null): Uint16Array {
  if (!codes.includes(NO_ESTIMATE) && !dry?.includes(1)) return codes;
  const out = codes.slice();
  for (let j = 0; j < ny; j++)
    for (let i = 0; i < nx; i++) if (isBare(codes, dry, j * nx + i)) out[j * nx + i] = neighbourMean(codes, dry, nx, ny, i, j);
  return out;
}

const isBare = (codes: Uint16Array, dry: Uint8Array | null, node: number): boolean => codes[node] === NO_ESTIMATE || dry?.[node] === 1;

function neighbourMean(codes: Uint16Array, dry: Uint8Array | null, nx: number, ny: number, i: number, j: number): number {
  let sum = 0;
  let count = 0;
  for (let y = Math.max(0, j - 1); y <= Math.min(ny - 1, j + 1); y++)
    for (let x = Math.max(0, i - 1); x <= Math.min(nx - 1, i + 1); x++) {
      if (isBare(codes, dry, y * nx + x)) continue;
      sum += codes[y * nx + x]!;
      count++;
    }
  return count === 0 ? 0 : Math.round(sum / count);
}
