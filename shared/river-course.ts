import { fromPlane, toPlane, type LocalPlane } from './geo';
import type { Reach } from './schemas/estimate';

/**
 * A reach's centreline on a plane round its first vertex, with a unit normal to the left at every vertex that turns
 * evenly in between: a place across the river is found without gaps at bends.
 */
export class RiverCourse {
  readonly plane: LocalPlane;
  private readonly km: number[] = [];
  private readonly x: number[] = [];
  private readonly y: number[] = [];
  private readonly leftX: number[] = [];
  private readonly leftY: number[] = [];

  constructor({ centreline }: Pick<Reach, 'centreline'>) {
    const [lon, lat] = centreline[0]!;
    this.plane = { originLon: lon, originLat: lat };
    for (const [atLon, atLat, km] of centreline) {
      const [x, y] = toPlane(this.plane, [atLon, atLat]);
      this.km.push(km);
      this.x.push(x);
      this.y.push(y);
    }
    centreline.forEach((_vertex, i) => this.addNormal(i));
  }

  private addNormal(i: number): void {
    let [nx, ny] = [0, 0];
    for (const k of [i - 1, i]) {
      if (k < 0 || k + 1 >= this.km.length) continue;
      const [dx, dy] = [this.x[k + 1]! - this.x[k]!, this.y[k + 1]! - this.y[k]!];
      const length = Math.hypot(dx, dy) || 1;
      nx -= dy / length;
      ny += dx / length;
    }
    const length = Math.hypot(nx, ny) || 1;
    this.leftX.push(nx / length);
    this.leftY.push(ny / length);
  }

  /** Place on the plane at a chainage (km, clamped to the reach), `offsetM` to the left of the centreline. */
  at(chainageKm: number, offsetM: number): [number, number] {
    const { km, x, y, leftX, leftY } = this;
    let low = 0;
    let high = km.length - 1;
    while (high - low > 1) {
      const mid = (low + high) >> 1;
      if (km[mid]! > chainageKm) low = mid;
      else high = mid;
    }
    const share = Math.min(1, Math.max(0, (chainageKm - km[low]!) / (km[high]! - km[low]!)));
    const nx = leftX[low]! + share * (leftX[high]! - leftX[low]!);
    const ny = leftY[low]! + share * (leftY[high]! - leftY[low]!);
    const scale = offsetM / (Math.hypot(nx, ny) || 1);
    return [x[low]! + share * (x[high]! - x[low]!) + nx * scale, y[low]! + share * (y[high]! - y[low]!) + ny * scale];
  }

  toLonLat(x: number, y: number): [number, number] {
    return fromPlane(this.plane, x, y);
  }
}
