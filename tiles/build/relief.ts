import type { Point } from '../district-points';
import { toXy, type Xy } from '../geometry/curves';
import { areasAbove, blur, cellMiddle, distanceTo, fillRing, markLine, type Grid } from '../geometry/grid';
import { fractalNoise } from '../geometry/noise';

export const grid: Grid = { x0: -56_000, y0: -54_000, cellM: 220, nx: 640, ny: 520 };

export type Ground = { heightM: Float64Array; depthM: Float64Array; isLand: Uint8Array; toRiverM: Float64Array; toShoreM: Float64Array };

const smoothStep = (x: number) => { const t = Math.min(1, Math.max(0, x)); return t * t * (3 - 2 * t); };
const hills: { at: Xy; heightM: number; radiusM: number }[] = [
  { at: toXy([-117.385, -44.383]), heightM: 120, radiusM: 1_500 },
  { at: toXy([-117.372, -44.566]), heightM: 95, radiusM: 1_400 },
  { at: toXy([-117.25, -44.36]), heightM: 160, radiusM: 5_500 },
  { at: toXy([-116.98, -44.63]), heightM: 210, radiusM: 7_000 },
  { at: toXy([-116.7, -44.3]), heightM: 230, radiusM: 8_000 },
];

/** Places whose depth is told elsewhere: the pens, the desalination intake and the outfall. */
const deeps: { at: Xy; moreM: number; radiusM: number }[] = [
  { at: toXy([-117.372, -44.545]), moreM: 11, radiusM: 1_300 },
  { at: toXy([-117.352, -44.428]), moreM: 1.2, radiusM: 900 },
  { at: toXy([-117.375, -44.447]), moreM: 2.2, radiusM: 1_500 },
];

/** Heights and depths of the invented island: ridges away from rivers and shores, valleys along them, a shelving sea. */
export function makeGround(coast: readonly Xy[], waters: readonly Xy[][], rivers: readonly Xy[][], streams: readonly Xy[][]): Ground {
  const size = grid.nx * grid.ny;
  const isLand = new Uint8Array(size);
  fillRing(grid, isLand, coast);
  for (const ring of waters) fillRing(grid, isLand, ring, 0);
  const isSea = Uint8Array.from(isLand, (land) => 1 - land);
  const riverMask = new Uint8Array(size);
  for (const line of rivers) markLine(grid, riverMask, line);
  for (const ring of waters) fillRing(grid, riverMask, ring);
  const streamMask = Uint8Array.from(riverMask);
  for (const line of streams) markLine(grid, streamMask, line);
  const toShoreM = distanceTo(grid, isSea);
  const toLandM = blur(grid, distanceTo(grid, isLand), 3, 2);
  const toRiverM = distanceTo(grid, riverMask);
  const toStreamM = distanceTo(grid, streamMask);
  const heightM = new Float64Array(size);
  const depthM = new Float64Array(size);
  for (let i = 0; i < size; i++) {
    const [x, y] = cellMiddle(grid, i);
    const rough = fractalNoise(x / 9_000, y / 9_000, 5, 51);
    const ridge = 1 - Math.abs(2 * fractalNoise(x / 12_000, y / 12_000, 4, 52) - 1);
    const rise = 60 * smoothStep(toShoreM[i]! / 4_000) + 560 * smoothStep((toShoreM[i]! - 1_500) / 24_000) * (0.25 + 0.95 * ridge * ridge);
    const knolls = hills.reduce((sum, hill) => sum + hill.heightM * Math.exp(-((Math.hypot(x - hill.at[0], y - hill.at[1]) / hill.radiusM) ** 2)), 0);
    const valley = 0.06 + 0.94 * smoothStep(toRiverM[i]! / 7_500);
    const gully = 0.5 + 0.5 * smoothStep(toStreamM[i]! / 2_400);
    heightM[i] = isLand[i] ? (rise * valley * gully + knolls * Math.min(1, toShoreM[i]! / 900)) * (0.55 + 0.9 * rough) : 0;
    const offshore = Math.max(0, toLandM[i]! - 180) * (0.75 + 0.5 * fractalNoise(x / 5_000, y / 5_000, 3, 53));
    const deeper = deeps.reduce((sum, deep) => sum + deep.moreM * Math.exp(-((Math.hypot(x - deep.at[0], y - deep.at[1]) / deep.radiusM) ** 2)), 0) * Math.min(1, toLandM[i]! / 900);
    depthM[i] = isLand[i] ? 0 : 19.5 * (1 - Math.exp(-offshore / 2_900)) + Math.max(0, offshore - 8_500) * 0.0021 + deeper;
  }
  return { heightM, depthM, isLand, toRiverM, toShoreM };
}

/** Light from the north-west falling on the ground: positive lit, negative in shade, about -1 to 1. */
export function lightOn(ground: Ground): Float64Array {
  const { nx, ny, cellM } = grid;
  const light = new Float64Array(nx * ny);
  for (let j = 1; j < ny - 1; j++)
    for (let i = 1; i < nx - 1; i++) {
      const k = j * nx + i;
      const east = (ground.heightM[k + 1]! - ground.heightM[k - 1]!) / (2 * cellM);
      const north = (ground.heightM[k + nx]! - ground.heightM[k - nx]!) / (2 * cellM);
      light[k] = 9 * (east - north) * Math.SQRT1_2;
    }
  return light;
}

/** Woods: on slopes and in hollows away from the shore and the valley floor. */
export function woodField(ground: Ground): Float64Array {
  return Float64Array.from(ground.heightM, (height, i) => {
    if (!ground.isLand[i] || ground.toShoreM[i]! < 450) return -1;
    const [x, y] = cellMiddle(grid, i);
    const patch = fractalNoise(x / 2_300, y / 2_300, 4, 61);
    const slopes = 0.11 * smoothStep((height - 25) / 110) - 0.3 * smoothStep((height - 300) / 160);
    return patch + slopes - 0.66 + 0.02 * fractalNoise(x / 600, y / 600, 2, 62);
  });
}

export const areas = (field: ArrayLike<number>, level: number): Point[][][] => areasAbove(grid, field, level);
