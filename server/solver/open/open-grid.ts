import type { PlaneGrid } from '../../../shared/frames';
import type { Meter } from '../meter';
import type { Weights } from '../release-profile';
import type { GriddedField } from '../types';
import { clearLand, type PlaneArea } from './area-mask';
import { gridPuffs } from './grid-puffs';
import { addPuffs } from './puff-kernel';
import { Puff, type OpenMotion, type OpenSource } from './puffs';
import { alongAcross, leftOf } from './shores';

export type Box = { x0: number; y0: number; x1: number; y1: number; sigmaM: number };

/** What the grids of one estimate share. */
export type OpenGridding = {
  readonly motion: OpenMotion;
  readonly sources: readonly OpenSource[];
  readonly area: PlaneArea;
  readonly originLon: number;
  readonly originLat: number;
  readonly maxNodes: number;
  readonly withLoss: boolean;
  /** Values are capped at the solubility, kg/m3. */
  readonly solubility: number;
  readonly meter: Meter;
};

/** Five standard deviations round the clouds at time t, and the smallest standard deviation among them; null before any release. */
export function cloudBox(motion: OpenMotion, sources: readonly OpenSource[], weights: Weights, tS: number): Box | null {
  const box: Box = { x0: Infinity, y0: Infinity, x1: -Infinity, y1: -Infinity, sigmaM: Infinity };
  for (const source of sources) {
    const { profile, index } = source.release;
    if (tS <= profile.startS || weights[index] === 0) continue;
    const puff = new Puff(motion, source);
    const last = Math.min(tS, profile.stopS);
    const samples = profile.isInstant ? 1 : 41;
    for (let k = 0; k < samples; k++) {
      puff.seen(profile.startS + (samples === 1 ? 0 : ((last - profile.startS) * k) / (samples - 1)), tS, false);
      const [sxx, , syy] = puff.covariance;
      box.sigmaM = Math.min(box.sigmaM, Math.sqrt(Math.min(sxx!, syy!)));
      if (typeof motion.shore?.oppositeM === 'number') {
        widenBetweenShores(box, motion, puff);
        continue;
      }
      for (let image = 0; image < puff.images; image++) {
        const { x, y } = puff.centre(image);
        widen(box, x, y, 5 * Math.sqrt(sxx!), 5 * Math.sqrt(syy!));
      }
    }
  }
  return box.x1 > box.x0 ? box : null;
}

function widen(box: Box, x: number, y: number, halfX: number, halfY: number): void {
  box.x0 = Math.min(box.x0, x - halfX);
  box.x1 = Math.max(box.x1, x + halfX);
  box.y0 = Math.min(box.y0, y - halfY);
  box.y1 = Math.max(box.y1, y + halfY);
}

/** Five standard deviations along two shores, from one to the other. */
function widenBetweenShores(box: Box, { shore }: OpenMotion, puff: Puff): void {
  const { ex, ey, oppositeM } = shore!;
  const reach = 5 * Math.sqrt(alongAcross(shore!, puff.covariance).along);
  const { x, y } = puff.centre(0);
  const off = leftOf(shore!, x, y);
  for (const along of [-reach, reach]) for (const across of [-off, oppositeM! - off]) widen(box, x + along * ex - across * ey, y + along * ey + across * ex, 0, 0);
}

export const clipBox = (box: Box, area: PlaneArea): Box | null => {
  const clipped = { x0: Math.max(box.x0, area.x0), y0: Math.max(box.y0, area.y0), x1: Math.min(box.x1, area.x1), y1: Math.min(box.y1, area.y1), sigmaM: box.sigmaM };
  return clipped.x1 > clipped.x0 && clipped.y1 > clipped.y0 ? clipped : null;
};

export const unionBox = (a: Box | null, b: Box | null): Box | null =>
  !a || !b ? (a ?? b) : { x0: Math.min(a.x0, b.x0), y0: Math.min(a.y0, b.y0), x1: Math.max(a.x1, b.x1), y1: Math.max(a.y1, b.y1), sigmaM: Math.min(a.sigmaM, b.sigmaM) };

/**
 * Empty cells round the box, so that no isoline ends at the grid's border, not even at a source of no size at its very edge:
 * a puff is drawn at least 0.7 cells wide, so five cells are seven of its standard deviations, 1e-11 of its middle.
 */
const MARGIN_CELLS = 5;

/** Five nodes a standard deviation where `maxNodes` allows it, and never fewer than 24 a side, with a margin of empty cells. */
export function gridFor(box: Box, origin: { originLon: number; originLat: number }, maxNodes: number): PlaneGrid {
  const nodes = (width: number): number => Math.min(maxNodes - 2 * MARGIN_CELLS, Math.max(24, Math.ceil((5 * width) / Math.max(box.sigmaM, 1e-3)) + 1));
  const nx = nodes(box.x1 - box.x0);
  const ny = nodes(box.y1 - box.y0);
  const dxM = (box.x1 - box.x0) / (nx - 1);
  const dyM = (box.y1 - box.y0) / (ny - 1);
  return { kind: 'plane', originLon: origin.originLon, originLat: origin.originLat, x0M: box.x0 - MARGIN_CELLS * dxM, y0M: box.y0 - MARGIN_CELLS * dyM, dxM, dyM, nx: nx + 2 * MARGIN_CELLS, ny: ny + 2 * MARGIN_CELLS };
}

/** Adds all releases at time t to `out`, each capped at the strength of what was spilled. */
export function addField(out: Float64Array, grid: PlaneGrid, gridding: OpenGridding, weights: Weights, tS: number): void {
  const smallest = 0.7 * Math.max(grid.dxM, grid.dyM);
  for (const source of gridding.sources) {
    const weight = weights[source.release.index]!;
    const puffs = gridPuffs(gridding.motion, source, tS, weight, smallest, gridding.withLoss);
    if (source.release.capPerKg === Infinity) {
      addPuffs(out, grid, puffs);
      continue;
    }
    const alone = new Float64Array(out.length);
    addPuffs(alone, grid, puffs);
    const cap = weight * source.release.capPerKg;
    for (let i = 0; i < out.length; i++) out[i]! += Math.min(alone[i]!, cap);
  }
}

const capAt = (values: Float64Array, cap: number): void => {
  if (cap === Infinity) return;
  for (let i = 0; i < values.length; i++) if (values[i]! > cap) values[i] = cap;
};

/** The field at one time on a grid that follows the cloud; land is zero. */
export function fieldAt(gridding: OpenGridding, weights: Weights, tS: number): GriddedField {
  const cloud = cloudBox(gridding.motion, gridding.sources, weights, tS);
  const box = cloud && clipBox(cloud, gridding.area);
  if (!box) return { grid: emptyGrid(gridding), values: new Float64Array(4) };
  const grid = gridFor(box, gridding, gridding.maxNodes);
  const values = new Float64Array(grid.nx * grid.ny);
  addField(values, grid, gridding, weights, tS);
  clearLand(values, grid, gridding.area);
  capAt(values, gridding.solubility);
  return { grid, values };
}

function emptyGrid({ sources, originLon, originLat }: OpenGridding): PlaneGrid {
  const at = sources[0]!.origins[0]!;
  return { kind: 'plane', originLon, originLat, x0M: at.x, y0M: at.y, dxM: 1, dyM: 1, nx: 2, ny: 2 };
}

/**
 * Largest value at each node of one grid over all clouds, up to each of the times `untilS` (ascending): from fields close
 * enough for a cloud to move one node or one standard deviation, in one pass.
 */
export function envelopesOf(gridding: OpenGridding, weights: Weights, untilS: readonly number[], maxFields: number): GriddedField[] {
  const { motion, sources, area } = gridding;
  const startS = Math.min(...sources.map((source) => source.release.profile.startS));
  const endS = untilS[untilS.length - 1]!;
  let cloud: Box | null = null;
  for (let k = 1; k <= 48; k++) cloud = unionBox(cloud, cloudBox(motion, sources, weights, startS + ((endS - startS) * k) / 48));
  const box = cloud && clipBox(cloud, area);
  if (!box) return untilS.map(() => ({ grid: emptyGrid(gridding), values: new Float64Array(4) }));
  const grid = gridFor(box, gridding, gridding.maxNodes);
  const most = new Float64Array(grid.nx * grid.ny);
  const scratch = new Float64Array(most.length);
  const out: GriddedField[] = [];
  for (const tS of envelopeTimes(gridding, startS, untilS, Math.max(grid.dxM, grid.dyM), maxFields)) {
    gridding.meter.assertWanted();
    scratch.fill(0);
    addField(scratch, grid, gridding, weights, tS);
    for (let i = 0; i < most.length; i++) if (scratch[i]! > most[i]!) most[i] = scratch[i]!;
    if (tS !== untilS[out.length]) continue;
    const values = most.slice();
    clearLand(values, grid, area);
    capAt(values, gridding.solubility);
    out.push({ grid, values });
  }
  return out;
}

/** Times from the first release to the last of `untilS`, which are all among them. */
function envelopeTimes({ motion, sources }: OpenGridding, startS: number, untilS: readonly number[], cellM: number, maxFields: number): number[] {
  const births = sources.map((source) => source.release.profile);
  const speed = Math.max(motion.current.maxSpeedMps, 1e-4);
  const endS = untilS[untilS.length - 1]!;
  const least = (endS - startS) / maxFields;
  const out: number[] = untilS.filter((until) => until <= startS);
  let t = startS;
  for (const until of untilS) {
    while (t < until) {
      const youngest = Math.min(...births.filter((profile) => profile.startS <= t).map((profile) => t - Math.min(t, profile.stopS)));
      const sigma = Math.max(cellM, Math.sqrt(motion.spread.smallest(youngest)));
      t = Math.min(until, t + Math.max(least, sigma / speed));
      out.push(t);
    }
  }
  return out;
}
