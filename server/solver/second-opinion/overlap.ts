import { toPlane } from '../../../shared/geo';
import type { PathCloud } from '../paths/plan';
import type { GriddedField } from '../types';

/** Blocks each way into which a field is gathered before it is compared. */
const BLOCKS = 12;

/**
 * Share of two clouds that lies in the same place, 0 to 1: both gathered into blocks, each made to sum to one, the
 * smaller of both summed. Chance lowers it by about sqrt(blocks / (2 pi paths)): 5 % for 4,000 paths over 60 blocks.
 */
export function overlapOf(field: GriddedField, cloud: PathCloud, sectionM2: (reachId: string) => number): number | null {
  const own = field.grid.kind === 'plane' ? planeBlocks(field, cloud) : channelBlocks(field, cloud, sectionM2);
  if (!own) return null;
  const [a, b] = own;
  const [sumA, sumB] = [a.reduce((s, v) => s + v, 0), b.reduce((s, v) => s + v, 0)];
  if (sumA <= 0 || sumB <= 0) return null;
  let shared = 0;
  for (let i = 0; i < a.length; i++) shared += Math.min(a[i]! / sumA, b[i]! / sumB);
  return shared;
}

type Blocks = [Float64Array, Float64Array];

function planeBlocks({ grid, values }: GriddedField, { places }: PathCloud): Blocks | null {
  if (grid.kind !== 'plane') return null;
  const a = new Float64Array(BLOCKS * BLOCKS + 1);
  const b = new Float64Array(BLOCKS * BLOCKS + 1);
  const block = (i: number, j: number): number => Math.floor((j * BLOCKS) / grid.ny) * BLOCKS + Math.floor((i * BLOCKS) / grid.nx);
  for (let j = 0; j < grid.ny; j++) for (let i = 0; i < grid.nx; i++) if (values[j * grid.nx + i]! > 0) a[block(i, j)]! += values[j * grid.nx + i]!;
  for (const { position, amount } of places) {
    const [x, y] = toPlane(grid, position);
    const [i, j] = [Math.round((x - grid.x0M) / grid.dxM), Math.round((y - grid.y0M) / grid.dyM)];
    b[i < 0 || j < 0 || i >= grid.nx || j >= grid.ny ? BLOCKS * BLOCKS : block(i, j)]! += amount;
  }
  return [a, b];
}

/** Along a river: nodes weighted by the water they stand for. */
function channelBlocks({ grid, values }: GriddedField, { places }: PathCloud, sectionM2: (reachId: string) => number): Blocks | null {
  if (grid.kind !== 'channel' || grid.parts.length === 0) return null;
  const n = 2 * BLOCKS;
  const all = grid.parts.reduce((sum, part) => sum + spanKm(part.chainageKm), 0);
  const starts = new Map<string, { top: number; span: number; from: number }>();
  let from = 0;
  for (const part of grid.parts) {
    const span = spanKm(part.chainageKm);
    starts.set(part.reachId, { top: Math.max(part.chainageKm[0]!, part.chainageKm[part.chainageKm.length - 1]!), span, from });
    from += span;
  }
  const a = new Float64Array(n + 1);
  const b = new Float64Array(n + 1);
  const block = (reachId: string | null, km: number): number => {
    const start = reachId === null ? undefined : starts.get(reachId);
    if (!start || km > start.top || km < start.top - start.span) return n;
    return Math.min(n - 1, Math.floor(((start.from + start.top - km) / all) * n));
  };
  let at = 0;
  for (const part of grid.parts) {
    part.chainageKm.forEach((km, i) => {
      const [before, after] = [part.chainageKm[Math.max(0, i - 1)]!, part.chainageKm[Math.min(part.chainageKm.length - 1, i + 1)]!];
      for (let j = 0; j < part.nAcross; j++, at++) {
        const edge = j === 0 || j === part.nAcross - 1 ? 0.5 : 1;
        if (values[at]! > 0) a[block(part.reachId, km)]! += (values[at]! * edge * sectionM2(part.reachId) * Math.abs(before - after)) / 2;
      }
    });
  }
  for (const { amount, reachId, chainageKm } of places) b[block(reachId, chainageKm)]! += amount;
  return [a, b];
}

const spanKm = (chainageKm: readonly number[]): number => Math.abs(chainageKm[0]! - chainageKm[chainageKm.length - 1]!);
