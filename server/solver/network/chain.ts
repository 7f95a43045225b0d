import { ParcelRow, type Amounts } from './parcel-row';
import type { PathFlow } from './path-flow';
import { disperse } from './sweep';
import type { Tubes } from './tubes';

/** Parcels at an edge keep below this share of the largest concentration, so that the closed end is not felt. */
const EDGE_SHARE = 1e-11;
/** Parcels at an edge below this share are left out: over thousands of steps a billionth of a per cent of the amount at most. */
export const DROP_SHARE = 1e-14;

/** A step of dispersion is divided into no more parts than this. */
const MOST_PARTS = 4;
/** Into how many is asked again after so many steps. */
const PARTS_EVERY = 16;

/** Where a row of parcels may reach: between stirred waters, or beyond the ends of the river. */
export type ChainLimits = {
  readonly topM: number;
  readonly endM: number;
  /** True where what passes the end goes into stirred water. */
  readonly isCut: boolean;
};

/**
 * A row of water parcels between two places, which keep their water and move with the flow: advection without numerical
 * diffusion, whatever the flow does. In steady flow all parcels are one time step long, so that after every step each
 * stands where the one before it stood: the shift of a unit Courant number. The row covers the cloud and grows at its
 * ends as the cloud spreads.
 */
export class Chain extends ParcelRow {
  private readonly joinedValue: Float64Array;
  /** What left over the end, by layer. */
  readonly left: Amounts;
  private margin = 8;
  private parts = 1;
  private spreads = 0;

  constructor(
    readonly flow: PathFlow,
    tubes: Tubes,
    layers: number,
    readonly limits: ChainLimits,
    /** Length of a new parcel, m, at a place. */
    private readonly lengthAt: (xM: number) => number,
  ) {
    super(tubes, layers);
    this.joinedValue = new Float64Array(tubes.count);
    this.left = new Float64Array(layers);
  }

  /** Starts the row with one clean parcel. */
  begin(upperM: number, tS: number): void {
    this.from = this.to = this.capacity >> 1;
    this.face[this.from] = upperM;
    this.appendBelow(tS);
  }

  private appendBelow(tS: number): void {
    if (this.to >= this.capacity) this.recentre();
    const p = this.to++;
    this.face[p + 1] = this.flow.below(this.face[p]!, this.lengthAt(this.face[p]!));
    this.fillClean(p, tS);
  }

  /** Adds a clean parcel at the upper end; false where the row has reached its top. */
  appendAbove(tS: number): boolean {
    const upper = this.flow.above(this.face[this.from]!, this.lengthAt(this.face[this.from]! - 1e-6));
    const length = this.face[this.from]! - upper;
    // Half a parcel may stand above the top: a release there lies in the middle of its parcel.
    if (upper < this.limits.topM - 0.5001 * length) return false;
    if (this.from === 0) this.recentre();
    const p = --this.from;
    this.face[p] = upper;
    this.fillClean(p, tS);
    return true;
  }

  private fillClean(p: number, tS: number): void {
    const x = this.centre(p);
    const r = this.flow.reachAt(x);
    this.stage[p] = r;
    const length = this.face[p + 1]! - this.face[p]!;
    this.volume[p] = this.flow.isSteady ? this.flow.dischargeM3s(r, x, tS) * this.flow.travelS(this.face[p]!, this.face[p + 1]!) : this.flow.areaM2(r, x, tS) * length;
    this.value.fill(0, p * this.lanes, (p + 1) * this.lanes);
  }

  /** Moves all parcels with the flow; those that have come into a larger river take up its water. */
  move(tS: number, dtS: number): void {
    for (let p = this.from; p <= this.to; p++) this.face[p] = this.flow.advance(this.face[p]!, tS, dtS);
    this.passEnd();
    for (let p = this.from; p < this.to; p++) {
      const x = this.centre(p);
      const r = this.flow.reachAt(x);
      // Water that a tide brings back up has mixed already.
      while (this.stage[p]! < r) this.enter(p, this.stage[p]! + 1, tS + dtS);
    }
  }

  private enter(p: number, r: number, tS: number): void {
    const { x0, joined } = this.flow.reaches[r]!;
    const before = this.flow.dischargeM3s(r - 1, x0, tS);
    const after = this.flow.dischargeM3s(r, x0, tS);
    const grown = after / before;
    this.stage[p] = r;
    this.volume[p]! *= grown;
    const at = p * this.lanes;
    const n = this.tubes.count;
    for (let layer = 0; layer < this.layers; layer++) {
      const start = at + layer * n;
      if (joined) {
        // Its stretch of the joined river; what the discharges lack or have over goes evenly over the section.
        const share = this.flow.reaches.some((reach) => reach.wave) ? Math.min(0.9999, Math.max(1e-4, before / after)) : joined.share;
        const low = joined.low === 0 ? 0 : joined.low >= 1 - joined.share - 1e-9 ? 1 - share : (joined.low / (1 - joined.share)) * (1 - share);
        this.tubes.join(this.joinedValue, this.value, start, low, share);
        for (let j = 0; j < n; j++) this.value[start + j] = this.joinedValue[j]! / (grown * share);
      } else for (let j = start; j < start + n; j++) this.value[j]! /= grown;
    }
  }

  /** Takes out what has passed the end; a parcel half-way is cut where stirred water begins. */
  private passEnd(): void {
    const { endM, isCut } = this.limits;
    while (this.to > this.from && this.face[this.to]! > endM) {
      const p = this.to - 1;
      const length = this.face[p + 1]! - this.face[p]!;
      const overshoot = (this.face[p + 1]! - endM) / length;
      // A sliver goes with the rest.
      const beyond = overshoot > 1 - 1e-6 ? 1 : overshoot;
      if (beyond < 1 && !isCut) return;
      for (let layer = 0; layer < this.layers; layer++) this.left[layer]! += beyond * this.massOf(p, layer);
      if (beyond >= 1) this.to--;
      else {
        this.volume[p]! *= 1 - beyond;
        this.face[p + 1] = endM;
        return;
      }
    }
  }

  /** Puts an amount into the water at x, spread over the two nearest parcels so that its place is kept; `shares` over the tubes. */
  inject(xM: number, amount: Amounts, shares: Float64Array): void {
    let low = this.from;
    let high = this.to - 1;
    while (low < high) {
      const mid = (low + high + 1) >> 1;
      if (this.centre(mid) <= xM) low = mid;
      else high = mid - 1;
    }
    const next = low + 1;
    let share = 0;
    if (next < this.to && this.stage[next] === this.stage[low]) share = Math.min(1, Math.max(0, (xM - this.centre(low)) / (this.centre(next) - this.centre(low))));
    this.put(low, 1 - share, amount, shares);
    if (share > 0) this.put(next, share, amount, shares);
  }

  private put(p: number, part: number, amount: Amounts, shares: Float64Array): void {
    for (let layer = 0; layer < this.layers; layer++)
      for (let j = 0; j < this.tubes.count; j++)
        this.value[p * this.lanes + layer * this.tubes.count + j]! += (part * amount[layer]! * shares[j]!) / (this.tubes.share[j]! * this.volume[p]!);
  }

  /** Mixing across and dispersion along over dt. */
  spread(tS: number, dtS: number): void {
    const { flow, tubes } = this;
    const perSpacing = dtS / tubes.spacing ** 2;
    let before = -Infinity;
    for (let p = this.from; p < this.to; p++) {
      const x = this.centre(p);
      const r = flow.reachAt(x);
      const strength = flow.mixingPerS(r, x, tS) * perSpacing;
      for (let layer = 0; layer < this.layers; layer++) tubes.mix(this.value, p * this.lanes + layer * tubes.count, strength);
      if (p > this.from) this.conductance[p] = this.conductanceOf(p, x - before, tS);
      before = x;
    }
    let most = 0;
    for (let p = this.from + 1; p < this.to; p++) most = Math.max(most, (this.conductance[p]! * dtS) / this.volume[p]!);
    this.margin = Math.min(200, Math.ceil(6 + 8 * Math.sqrt(most)));
    if (this.to - this.from < 2) return;
    // Through the top only water comes in. In the frame of the parcels the top runs up one parcel in a step: on average
    // it stands at the lower face of the parcel that has just come in.
    if (this.face[this.from]! < this.limits.topM + 1e-6) this.conductance[this.from + 1] = 0;
    if (this.spreads++ % PARTS_EVERY === 0) this.parts = this.partsNeeded(dtS);
    const { parts } = this;
    for (let i = 0; i < parts; i++) disperse(this.value, this.rhs, this.upper, this.volume, this.conductance, this.explicit, this.from, this.to, this.lanes, dtS / parts);
  }

  /** Crank-Nicolson keeps values positive up to a mixing number of 1: where most of the amount stands, longer steps are divided. */
  private partsNeeded(dtS: number): number {
    let [mass, mixing] = [0, 0];
    for (let p = this.from + 1; p < this.to; p++) {
      const own = this.massOf(p, 0);
      mass += own;
      mixing += (own * this.conductance[p]! * dtS) / this.volume[p]!;
    }
    return mass > 0 ? Math.min(MOST_PARTS, Math.max(1, Math.ceil(mixing / mass))) : 1;
  }

  /** Conductance of the face above parcel p: area times dispersion over the distance of the centres. */
  private conductanceOf(p: number, distanceM: number, tS: number): number {
    if (distanceM <= 0) return 0;
    const { flow } = this;
    const [a, b] = [this.stage[p - 1]!, this.stage[p]!];
    // While two waters are just meeting, only what lies side by side could exchange: it waits for one step.
    for (let r = a + 1; r <= b; r++) if (flow.reaches[r]!.joined) return 0;
    const x = this.face[p]!;
    const r = flow.reachAt(x);
    const areas = this.volume[p - 1]! / (x - this.face[p - 1]!) + this.volume[p]! / (this.face[p + 1]! - x);
    const area = flow.isTidal ? areas / 2 : flow.areaM2(r, x, tS);
    return (area * flow.dispersionM2s(r, x, tS)) / distanceM;
  }

  /**
   * Fits the row to its cloud: clean parcels where it nears an end or where [coverFrom, coverTo] is not covered, and
   * the ends left out where nothing worth naming is left.
   */
  fit(tS: number, coverFromM: number, coverToM: number): void {
    let peak = 0;
    for (let p = this.from; p < this.to; p++) peak = Math.max(peak, this.largestAt(p));
    const edge = peak * EDGE_SHARE;
    this.trim(peak * DROP_SHARE, coverFromM, coverToM);
    let first = this.from;
    while (first < this.to && this.largestAt(first) <= edge) first++;
    let last = this.to - 1;
    while (last >= this.from && this.largestAt(last) <= edge) last--;
    const above = first < this.to ? this.margin - (first - this.from) : 0;
    const below = first < this.to ? this.margin - (this.to - 1 - last) : 0;
    for (let i = 0; i < above && this.appendAbove(tS); i++);
    while (this.face[this.from]! > coverFromM && this.appendAbove(tS));
    for (let i = 0; i < below && this.appendBelowEnd(tS); i++);
    while (this.face[this.to]! < coverToM && this.appendBelowEnd(tS));
  }

  private appendBelowEnd(tS: number): boolean {
    if (this.face[this.to]! >= this.limits.endM) return false;
    this.appendBelow(tS);
    return true;
  }

  private trim(least: number, coverFromM: number, coverToM: number): void {
    const room = 3 * this.margin;
    while (this.to - this.from > room && this.face[this.from + 1]! < coverFromM && this.largestAt(this.from) <= least && this.largestAt(this.from + 1) <= least) this.from++;
    while (this.to - this.from > room && this.face[this.to - 1]! > coverToM && this.largestAt(this.to - 1) <= least && this.largestAt(this.to - 2) <= least) this.to--;
  }
}
