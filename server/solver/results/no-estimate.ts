import { toPlane } from '../../../shared/geo';
import { nearFieldOf } from '../checks/near-field';
import { waterAtPlaces } from '../checks/place-water';
import type { GriddedField, RunInput } from '../types';

/** A stretch of a reach or a circle within which a rule gives no estimate. */
type Zone = { readonly position: readonly [number, number]; readonly reachId: string | null; readonly chainageKm: number; readonly radiusM: number };

/** Where the map is hatched: the near field of every release, or everywhere once a rule stops the whole run. */
export type NoEstimate = { readonly zones: readonly Zone[]; readonly isEverywhere: boolean };

export function noEstimateOf({ doc, releases }: RunInput, isEverywhere: boolean): NoEstimate {
  const waterAt = waterAtPlaces(doc);
  const zones = releases.flatMap(({ release }): Zone[] => {
    const { depthM, speedMps } = waterAt(release.channel);
    const { leastM } = nearFieldOf(doc, depthM, speedMps, release.initialRadiusM);
    return [{ position: release.position, reachId: release.channel?.reachId ?? null, chainageKm: release.channel?.chainageKm ?? 0, radiusM: leastM }];
  });
  return { zones, isEverywhere };
}

/** The same field with NaN at the nodes that have no estimate; the given one stays as it is. */
export function hatched(field: GriddedField, { zones, isEverywhere }: NoEstimate): GriddedField {
  const values = Float64Array.from(field.values);
  if (isEverywhere) values.fill(NaN);
  else for (const zone of zones) hatchZone(values, field.grid, zone);
  return { grid: field.grid, values };
}

function hatchZone(values: Float64Array, grid: GriddedField['grid'], { position, reachId, chainageKm, radiusM }: Zone): void {
  if (grid.kind === 'plane') {
    const [x, y] = toPlane(grid, [position[0], position[1]]);
    const span = (at: number, first: number, step: number, n: number): [number, number] => [Math.max(0, Math.ceil((at - radiusM - first) / step)), Math.min(n - 1, Math.floor((at + radiusM - first) / step))];
    const [i0, i1] = span(x, grid.x0M, grid.dxM, grid.nx);
    const [j0, j1] = span(y, grid.y0M, grid.dyM, grid.ny);
    for (let j = j0; j <= j1; j++)
      for (let i = i0; i <= i1; i++) if (Math.hypot(grid.x0M + i * grid.dxM - x, grid.y0M + j * grid.dyM - y) < radiusM) values[j * grid.nx + i] = NaN;
    return;
  }
  let at = 0;
  for (const part of grid.parts)
    for (const km of part.chainageKm) {
      if (part.reachId === reachId && Math.abs(km - chainageKm) * 1_000 < radiusM) values.fill(NaN, at, at + part.nAcross);
      at += part.nAcross;
    }
}
