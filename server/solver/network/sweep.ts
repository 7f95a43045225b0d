/**
 * One implicit step of dispersion along a row of water parcels, in place, for all lanes at once:
 *   V_p dC_p/dt = g_p (C_{p-1} - C_p) + g_{p+1} (C_{p+1} - C_p),
 * no flux through the ends. Crank-Nicolson at faces where that keeps values positive, else as implicit as that needs,
 * face by face: what leaves one parcel enters the next, whatever the weights. Second order where Crank-Nicolson.
 *
 * @param value    concentrations, parcels x lanes, lane fastest; overwritten
 * @param rhs      scratch as long as `value`
 * @param upper    scratch, one number a parcel
 * @param volume   of the parcels, m3
 * @param g        conductance of the face above parcel p, m3/s; that of `from` is not read
 * @param explicit scratch, one number a face
 * Keeps: sum of V C to rounding; C >= 0. Cost: O(parcels x lanes), no allocation.
 * Source: Crank & Nicolson 1947, Proc. Camb. Phil. Soc. 43: 50; Thomas algorithm.
 */
export function disperse(value: Float64Array, rhs: Float64Array, upper: Float64Array, volume: Float64Array, g: Float64Array, explicit: Float64Array, from: number, to: number, lanes: number, dtS: number): void {
  explicitShares(explicit, volume, g, from, to, dtS);
  for (let p = from; p < to; p++) {
    const above = p > from ? dtS * g[p]! : 0;
    const below = p < to - 1 ? dtS * g[p + 1]! : 0;
    const [ea, eb] = [above * explicit[p]!, below * explicit[p + 1]!];
    const lower = above - ea;
    const pivot = 1 / (volume[p]! + lower + (below - eb) - lower * (p > from ? upper[p - 1]! : 0));
    upper[p] = (below - eb) * pivot;
    const at = p * lanes;
    const own = volume[p]! - ea - eb;
    for (let l = at; l < at + lanes; l++) {
      let sum = own * value[l]!;
      if (p > from) sum += ea * value[l - lanes]! + lower * rhs[l - lanes]!;
      if (p < to - 1) sum += eb * value[l + lanes]!;
      rhs[l] = sum * pivot;
    }
  }
  for (let l = (to - 1) * lanes; l < to * lanes; l++) value[l] = rhs[l]!;
  for (let p = to - 2; p >= from; p--) {
    const u = upper[p]!;
    const at = p * lanes;
    for (let l = at; l < at + lanes; l++) value[l] = rhs[l]! + u * value[l + lanes]!;
  }
}

/** Explicit share of each face: a half, less where the explicit part would take more than a parcel holds. */
function explicitShares(explicit: Float64Array, volume: Float64Array, g: Float64Array, from: number, to: number, dtS: number): void {
  let before = 0.5;
  for (let p = from; p < to; p++) {
    const outflow = dtS * ((p > from ? g[p]! : 0) + (p < to - 1 ? g[p + 1]! : 0));
    const own = outflow > 2 * volume[p]! ? volume[p]! / outflow : 0.5;
    explicit[p] = Math.min(before, own);
    before = own;
  }
  explicit[to] = before;
}
