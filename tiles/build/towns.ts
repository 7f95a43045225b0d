import type { Town } from '../district-points';
import { isInside, toXy, type Xy } from '../geometry/curves';
import { noise2, seededRandom } from '../geometry/noise';

export type TownShapes = { outline: Xy[]; blocks: Xy[][] };

/** Extent of a town by its people: about 4,400 people a square kilometre (invented). */
const radiusM = (people: number) => Math.sqrt((people / 4_400) * 1e6 / Math.PI);

/** An irregular outline and, inside it, blocks between streets that bend a little; `isDry` says where one may build. */
export function buildTown(town: Town, seed: number, isDry: (at: Xy) => boolean): TownShapes {
  const random = seededRandom(seed);
  const [cx, cy] = toXy(town.at);
  const radius = radiusM(town.people);
  const outline: Xy[] = [];
  for (let k = 0; k < 96; k++) {
    const angle = (2 * Math.PI * k) / 96;
    const stretch = 0.74 + 0.62 * noise2(2.2 * Math.cos(angle) + 5, 2.2 * Math.sin(angle) + 5, seed) + 0.16 * (noise2(9 * Math.cos(angle), 9 * Math.sin(angle), seed + 1) - 0.5);
    outline.push([cx + radius * stretch * 1.15 * Math.cos(angle), cy + radius * stretch * 0.9 * Math.sin(angle)]);
  }
  const [lengthM, depthM, streetM] = town.people > 20_000 ? [150, 92, 17] : [110, 74, 15];
  const turn = (town.gridDeg * Math.PI) / 180;
  const bend = (u: number, v: number): Xy => {
    const du = 70 * (noise2(u / 900, v / 900, seed + 2) - 0.5);
    const dv = 70 * (noise2(u / 900, v / 900, seed + 3) - 0.5);
    return [cx + (u + du) * Math.cos(turn) - (v + dv) * Math.sin(turn), cy + (u + du) * Math.sin(turn) + (v + dv) * Math.cos(turn)];
  };
  const blocks: Xy[][] = [];
  const reach = 1.6 * radius;
  for (let v = -reach; v < reach; v += depthM + streetM) {
    const slide = random() * lengthM;
    for (let u = -reach + slide; u < reach; ) {
      const width = lengthM * (0.55 + 0.9 * random());
      const corners = [bend(u, v), bend(u + width, v), bend(u + width, v + depthM), bend(u, v + depthM)];
      u += width + streetM;
      const isGreen = random() < 0.06;
      if (!isGreen && corners.every((corner) => isInside(corner, outline) && isDry(corner))) blocks.push(corners);
    }
  }
  return { outline, blocks };
}
