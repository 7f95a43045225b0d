import type { Chain } from './chain';

/** Parcels and weights that give the value at a place: up to four neighbours, by the cubic through their centres. */
export class Reader {
  readonly parcel = new Int32Array(4);
  readonly weight = new Float64Array(4);
  count = 0;

  /**
   * Finds x in a chain, reading only water of reach r, or such as runs into it unchanged: a cubic through four parcels
   * that share one river, else the straight line, else the nearest. `count` is 0 where no parcel stands there.
   */
  find(chain: Chain, xM: number, r: number): void {
    this.count = 0;
    if (chain.isEmpty || xM < chain.face[chain.from]! || xM > chain.face[chain.to]!) return;
    let low = chain.from;
    let high = chain.to - 1;
    while (low < high) {
      const mid = (low + high + 1) >> 1;
      if (chain.centre(mid) <= xM) low = mid;
      else high = mid - 1;
    }
    if (!isSameWater(chain, low, r)) return this.take(isSameWater(chain, low + 1, r) ? low + 1 : isSameWater(chain, low - 1, r) ? low - 1 : low);
    if (!isSameWater(chain, low + 1, r) || chain.centre(low) > xM) return this.take(low);
    if (isSameWater(chain, low - 1, r) && isSameWater(chain, low + 2, r)) return this.cubic(chain, low - 1, xM);
    const share = (xM - chain.centre(low)) / (chain.centre(low + 1) - chain.centre(low));
    this.count = 2;
    [this.parcel[0], this.parcel[1]] = [low, low + 1];
    [this.weight[0], this.weight[1]] = [1 - share, share];
  }

  private take(p: number): void {
    this.count = 1;
    this.parcel[0] = p;
    this.weight[0] = 1;
  }

  private cubic(chain: Chain, first: number, xM: number): void {
    this.count = 4;
    for (let i = 0; i < 4; i++) {
      let weight = 1;
      for (let j = 0; j < 4; j++) if (j !== i) weight *= (xM - chain.centre(first + j)) / (chain.centre(first + i) - chain.centre(first + j));
      this.parcel[i] = first + i;
      this.weight[i] = weight;
    }
  }

  lane(chain: Chain, lane: number): number {
    let sum = 0;
    for (let i = 0; i < this.count; i++) sum += this.weight[i]! * chain.value[this.parcel[i]! * chain.lanes + lane]!;
    return Math.max(0, sum);
  }
}

/** Whether a parcel of the chain holds the water of reach r: no confluence or change of discharge between. */
function isSameWater(chain: Chain, p: number, r: number): boolean {
  if (p < chain.from || p >= chain.to) return false;
  const a = Math.min(chain.stage[p]!, r);
  const b = Math.max(chain.stage[p]!, r);
  for (let i = a + 1; i <= b; i++) if (chain.flow.changesAt(i)) return false;
  return true;
}
