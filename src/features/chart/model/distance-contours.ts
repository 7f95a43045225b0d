import { contours } from 'd3-contour';
import type { EstimateResult } from '../../../../shared/schemas/estimate-result';

export type DistanceTime = NonNullable<EstimateResult['distanceTime']>;

/** Value of a list at a position between two of its entries. */
function between(list: readonly number[], at: number): number {
  const i = Math.min(list.length - 2, Math.max(0, Math.floor(at)));
  return list[i]! + (list[i + 1]! - list[i]!) * (at - i);
}

/** Grid positions of d3-contour are cell centres: node k lies at k + 0.5. */
const NODE = 0.5;

/**
 * SVG paths of the areas above each level in a distance-time field; logarithms are contoured, so that the lines of a
 * field over many decades do not crowd. x and y are given time (s) and the position along the path in list order.
 */
export function distancePaths(field: DistanceTime, levels: readonly number[], x: (timeS: number) => number, y: (column: number) => number): string[] {
  const nx = field.timesS.length;
  const ny = field.chainageKm.length;
  if (nx < 2 || ny < 2 || levels.length === 0) return levels.map(() => '');
  const floor = Math.log(Math.min(...levels)) - 3;
  const values = new Array<number>(nx * ny);
  for (let i = 0; i < nx; i++) for (let j = 0; j < ny; j++) values[j * nx + i] = Math.max(floor, Math.log(field.values[i]![j]!));
  const draw = contours().size([nx, ny]).smooth(true);
  return levels.map((level) => {
    const shape = draw.contour(values, Math.log(level));
    return shape.coordinates
      .flatMap((polygon) => polygon.map((ring) => `M${ring.map(([gx, gy]) => `${x(between(field.timesS, clamp(gx! - NODE, nx - 1))).toFixed(1)} ${y(clamp(gy! - NODE, ny - 1)).toFixed(1)}`).join('L')}Z`))
      .join('');
  });
}

const clamp = (value: number, most: number): number => Math.min(most, Math.max(0, value));

/** Distances in km travelled from the first column, which goes on growing where the path changes from one river to the next. */
export function travelledKm(field: DistanceTime): number[] {
  let sum = 0;
  return field.chainageKm.map((km, i) => {
    if (i > 0 && field.reachIds[i] === field.reachIds[i - 1]) sum += Math.abs(field.chainageKm[i - 1]! - km);
    else if (i > 0) sum += stepBefore(field, i);
    return sum;
  });
}

/** At a change of reach the chainage may jump to another river's count: the step before it is repeated, unless the count goes on. */
function stepBefore(field: DistanceTime, i: number): number {
  const jump = Math.abs(field.chainageKm[i - 1]! - field.chainageKm[i]!);
  const usual = i > 1 ? Math.abs(field.chainageKm[i - 2]! - field.chainageKm[i - 1]!) : jump;
  return jump <= 3 * usual ? jump : usual;
}

export { between as valueBetween };
