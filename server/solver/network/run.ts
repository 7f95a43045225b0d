import { SolverDivergedError } from '../errors';
import type { LossClock } from '../loss';
import type { Meter } from '../meter';
import type { ResolvedRelease } from '../release-profile';
import { Chain } from './chain';
import type { Amounts } from './parcel-row';
import type { PathFlow } from './path-flow';
import { EnvelopeRecorder, snapshotOf, StationRecorder, type BookRows, type Snapshot, type Station, type StationSeries } from './recorder';
import type { Resolution } from './resolution';
import { StirredWater } from './stirred';
import { Storage } from './storage';
import { Tubes } from './tubes';

/** What one kilogram of one release did. */
export type NetworkRun = {
  readonly release: ResolvedRelease;
  readonly flow: PathFlow;
  readonly resolution: Resolution;
  readonly tubes: Tubes;
  readonly sourceM: number;
  readonly timesS: Float64Array;
  readonly series: readonly StationSeries[];
  readonly snapshots: readonly Snapshot[];
  readonly envelope: EnvelopeRecorder;
  readonly books: BookRows;
  readonly mostParcels: number;
};

export type RunPlan = {
  readonly release: ResolvedRelease;
  readonly flow: PathFlow;
  readonly resolution: Resolution;
  readonly sourceM: number;
  readonly stations: readonly Station[];
  readonly sections: readonly { xM: number; reach: number }[];
  readonly snapshotTimesS: readonly number[];
  /** Times by which the largest values so far are kept. */
  readonly keepTimesS: readonly number[];
  readonly loss: LossClock;
  /** Show the layer with losses. */
  readonly showsLoss: boolean;
  readonly meter: Meter;
};

/** A stretch of the path between stirred waters, with the dead zones beside it and the stirred water at its end. */
type Stretch = { readonly chain: Chain; readonly storage: Storage | null; readonly end: { readonly water: StirredWater; readonly reach: number } | null };

/** Parts of a step in which a release or an outflow is put in. */
const PARTS = 4;

/**
 * Follows one kilogram of a release down its path. Each step: parcels move with the flow, half of what is released in
 * the step is put in, dead zones exchange, water mixes across and along, the other half is put in. Second order in time
 * where coefficients are even; moving itself is without error in steady flow.
 */
export class NetworkSimulation {
  private readonly tubes: Tubes;
  private readonly layers: number;
  private readonly stretches: Stretch[];
  private readonly sourceShares: Float64Array;
  private readonly evenShares: Float64Array;
  private readonly lost: Float64Array;
  private mostParcels = 0;
  private inWater = 1;

  constructor(private readonly plan: RunPlan) {
    const { flow, resolution, release } = plan;
    this.tubes = new Tubes(resolution.tubes);
    this.layers = plan.loss.kind === 'none' ? 1 : 2;
    this.lost = new Float64Array(this.layers);
    const { widthM } = flow.reaches[flow.reachAt(plan.sourceM)]!.state;
    this.sourceShares = this.tubes.sourceShares(release.release.channel!.bank, release.release.initialRadiusM ** 2 / (8 * widthM ** 2));
    this.evenShares = this.tubes.share;
    this.stretches = this.stretchesOf();
  }

  private stretchesOf(): Stretch[] {
    const { flow } = this.plan;
    const source = flow.reachAt(this.plan.sourceM);
    const cuts = flow.reaches.flatMap((reach, r) => (reach.hasStructure && r > source ? [r] : []));
    const beyondM = 2 * flow.excursionM + this.spreadBeyondEnd();
    const tops = [flow.reaches[0]!.isTidal && !flow.reaches[0]!.hasStructure ? -beyondM : 0, ...cuts.map((r) => flow.reaches[r]!.x0)];
    return tops.map((topM, i) => {
      const cut = cuts[i];
      const endM = cut === undefined ? flow.endM + beyondM : flow.reaches[cut]!.x0;
      const chain = new Chain(flow, this.tubes, this.layers, { topM, endM, isCut: cut !== undefined }, this.lengthAt);
      const holds = flow.reaches.some((reach) => reach.state.reach.storage && reach.x0 < endM && reach.x1 > topM);
      const structure = cut === undefined ? null : flow.reaches[cut]!.state.reach.structure!;
      return {
        chain,
        storage: holds ? new Storage(chain, flow, this.storageFaces(topM, endM, i === 0)) : null,
        end: structure ? { water: new StirredWater(structure.volumeM3, structure.tanks, this.layers), reach: cut! } : null,
      };
    });
  }

  /** Water is followed this far beyond the end of the river, so that the end is not felt: six standard deviations by then. */
  private spreadBeyondEnd(): number {
    const { flow, resolution } = this.plan;
    const { state } = flow.reaches[flow.reaches.length - 1]!;
    return 6 * Math.sqrt(2 * state.dispersionM2s * Math.min(resolution.steps * resolution.stepS, 20 * (state.dispersionM2s / state.speedMps ** 2)));
  }

  private readonly lengthAt = (xM: number): number => {
    const { flow, resolution } = this.plan;
    const reach = flow.reaches[flow.reachAt(xM)]!;
    return reach.isTidal ? resolution.tidalLengthM : reach.state.speedMps * resolution.stepS;
  };

  /** Faces of the dead zones' cells: where parcels stand after a step in steady flow. */
  private storageFaces(topM: number, endM: number, hasSource: boolean): number[] {
    const { flow } = this.plan;
    const faces = [hasSource ? this.firstFace() : topM - this.lengthAt(topM) / 2];
    for (;;) {
      const above = flow.above(faces[0]!, this.lengthAt(faces[0]! - 1e-6));
      if (above < topM - 0.5001 * (faces[0]! - above)) break;
      faces.unshift(above);
    }
    while (faces[faces.length - 1]! < endM) faces.push(flow.below(faces[faces.length - 1]!, this.lengthAt(faces[faces.length - 1]!)));
    return faces;
  }

  /** The source lies in the middle of its parcel after every step. */
  private firstFace(): number {
    return this.plan.sourceM - this.lengthAt(this.plan.sourceM) / 2;
  }

  run(): NetworkRun {
    const { plan } = this;
    const { steps, stepS } = plan.resolution;
    const { profile } = plan.release;
    const chains = this.stretches.map((stretch) => stretch.chain);
    const timesS = Float64Array.from({ length: steps + 1 }, (_, n) => profile.startS + n * stepS);
    const stations = new StationRecorder(plan.stations, steps, this.layers);
    const envelope = new EnvelopeRecorder(plan.sections, this.tubes.count, plan.showsLoss ? 1 : 0, plan.keepTimesS);
    const books: BookRows = { inWater: this.rows(steps), left: this.rows(steps), lost: new Float64Array(steps + 1) };
    const snapshots: Snapshot[] = [];
    this.start(timesS[0]!);
    for (let n = 0; n <= steps; n++) {
      if (n > 0 && !this.isOver(timesS[n - 1]!)) this.step(timesS[n - 1]!, stepS, n);
      const tS = timesS[n]!;
      stations.record(chains, n);
      envelope.record(chains, tS);
      this.keepBooks(books, n);
      for (const wanted of plan.snapshotTimesS) if (Math.round((wanted - timesS[0]!) / stepS) === n) snapshots.push(snapshotOf(chains.filter((chain) => !chain.isEmpty), plan.showsLoss ? 1 : 0, wanted, tS));
      this.mostParcels = Math.max(this.mostParcels, chains.reduce((sum, chain) => sum + chain.to - chain.from, 0));
    }
    return {
      release: plan.release,
      flow: plan.flow,
      resolution: plan.resolution,
      tubes: this.tubes,
      sourceM: plan.sourceM,
      timesS,
      series: stations.series,
      snapshots,
      envelope,
      books,
      mostParcels: this.mostParcels,
    };
  }

  /** Nothing worth naming is left, and nothing more comes. */
  private isOver(tS: number): boolean {
    return tS >= this.plan.release.profile.stopS && this.inWater < 1e-14;
  }

  private rows(steps: number): Float64Array[] {
    return Array.from({ length: this.layers }, () => new Float64Array(steps + 1));
  }

  private start(tS: number): void {
    const { chain } = this.stretches[0]!;
    const { sourceM, release } = this.plan;
    chain.begin(this.firstFace(), tS);
    const reach = 30 * this.lengthAt(sourceM) + 2.5 * release.release.initialRadiusM;
    chain.fit(tS, sourceM - reach, sourceM + reach);
    if (release.profile.isInstant) this.putSource(chain, sourceM, 1);
  }

  /** An amount of the release, over its first cloud where that is longer than a parcel. */
  private putSource(chain: Chain, xM: number, amount: number): void {
    const sigma = this.plan.release.release.initialRadiusM / 2;
    const amounts = new Float64Array(this.layers);
    if (sigma < 0.3 * this.lengthAt(xM)) return chain.inject(xM, amounts.fill(amount), this.sourceShares);
    const points = Math.min(400, Math.max(17, Math.ceil((16 * sigma) / this.lengthAt(xM))));
    let total = 0;
    const weight = (i: number): number => Math.exp(-0.5 * (-4.5 + (9 * i) / (points - 1)) ** 2);
    for (let i = 0; i < points; i++) total += weight(i);
    for (let i = 0; i < points; i++) {
      const at = Math.max(chain.face[chain.from]!, xM + sigma * (-4.5 + (9 * i) / (points - 1)));
      chain.inject(at, amounts.fill((amount * weight(i)) / total), this.sourceShares);
    }
  }

  private step(tS: number, dtS: number, n: number): void {
    const { plan } = this;
    const survival = this.layers === 2 ? Math.exp(plan.loss.exposure(tS) - plan.loss.exposure(tS + dtS)) : 1;
    let inflow: Amounts | null = null;
    this.stretches.forEach((stretch, i) => {
      inflow = this.stepStretch(stretch, i, tS, dtS, survival, inflow);
    });
    const first = this.stretches[0]!.chain;
    const cells = this.stretches.reduce((sum, { chain }) => sum + chain.to - chain.from, 0);
    plan.meter.count(cells * this.tubes.count * this.layers);
    if (!first.isEmpty && !Number.isFinite(first.value[((first.from + first.to) >> 1) * first.lanes]!)) throw new SolverDivergedError(n, tS, `parcel ${(first.to - first.from) >> 1} of ${first.to - first.from}`, 'a concentration is not a number');
  }

  /** One stretch over one step; gives what its end lets into the next. */
  private stepStretch(stretch: Stretch, i: number, tS: number, dtS: number, survival: number, inflow: Amounts | null): Amounts | null {
    const { chain, end } = stretch;
    const before = chain.left.slice();
    const isFed = inflow !== null && inflow[0]! > 0;
    const top = chain.limits.topM - this.lengthAt(chain.limits.topM) / 2;
    if (chain.isEmpty && isFed) chain.begin(top, tS);
    if (!chain.isEmpty) chain.move(tS, dtS);
    if (chain.isEmpty && isFed) chain.begin(top, tS + dtS);
    if (!chain.isEmpty) this.work(stretch, i, tS, dtS, survival, isFed ? inflow : null);
    if (!end) return null;
    const out = chain.left.map((sum, layer) => sum - before[layer]!);
    if (this.layers === 2) {
      this.lost[1]! += end.water.total(1) * (1 - survival);
      end.water.lose(1, survival);
    }
    end.water.pass(out, this.plan.flow.dischargeM3s(end.reach, this.plan.flow.reaches[end.reach]!.x0, tS), dtS);
    return out;
  }

  /** What happens in a stretch after its parcels have moved. */
  private work({ chain, storage }: Stretch, i: number, tS: number, dtS: number, survival: number, inflow: Amounts | null): void {
    const endS = tS + dtS;
    const { sourceM, release } = this.plan;
    const around = 2.3 * release.release.initialRadiusM + this.lengthAt(sourceM);
    const isReleasing = i === 0 && !release.profile.isInstant && tS < release.profile.stopS;
    const from = Math.max(chain.limits.topM, Math.min(isReleasing ? sourceM - around : Infinity, storage?.coverFromM ?? Infinity, inflow ? chain.limits.topM : Infinity));
    const to = Math.max(isReleasing ? sourceM + around : -Infinity, storage?.coverToM ?? -Infinity);
    chain.fit(endS, from, to);
    this.feed(chain, i, tS, dtS, inflow);
    storage?.exchange(dtS);
    chain.spread(endS, dtS);
    if (this.layers === 2) this.loseFrom(chain, storage, survival);
    this.feed(chain, i, tS, dtS, inflow);
  }

  /** Half of what is released, or let in from above, between t and t + dt, each part where the flow has taken it by the end of the step. */
  private feed(chain: Chain, i: number, tS: number, dtS: number, inflow: Amounts | null): void {
    const { flow, sourceM, release } = this.plan;
    const { profile } = release;
    const from = Math.max(tS, profile.startS);
    const to = Math.min(tS + dtS, profile.stopS);
    for (let k = 0; k < PARTS; k++) {
      if (i === 0 && !profile.isInstant && to > from) {
        const [a, b] = [from + ((to - from) * k) / PARTS, from + ((to - from) * (k + 1)) / PARTS];
        const middle = (a + b) / 2;
        this.putSource(chain, flow.advance(sourceM, middle, tS + dtS - middle), 0.5 * (profile.released(b) - profile.released(a)));
      }
      if (inflow) {
        const middle = tS + (dtS * (k + 0.5)) / PARTS;
        chain.inject(flow.advance(chain.limits.topM, middle, tS + dtS - middle), inflow.map((amount) => (0.5 * amount) / PARTS), this.evenShares);
      }
    }
  }

  private loseFrom(chain: Chain, storage: Storage | null, survival: number): void {
    this.lost[1]! += (chain.mass(1) + (storage?.mass(1) ?? 0)) * (1 - survival);
    chain.lose(1, survival);
    storage?.lose(1, survival);
  }

  private keepBooks(books: BookRows, n: number): void {
    const { endM } = this.plan.flow;
    for (let layer = 0; layer < this.layers; layer++) {
      const { chain: last, storage: lastZones } = this.stretches[this.stretches.length - 1]!;
      const beyond = last.mass(layer, endM) + (lastZones?.mass(layer, endM) ?? 0);
      books.inWater[layer]![n] = this.stretches.reduce((sum, { chain, storage, end }) => sum + chain.mass(layer, -Infinity, endM) + (storage?.mass(layer, -Infinity, endM) ?? 0) + (end?.water.total(layer) ?? 0), 0);
      books.left[layer]![n] = last.left[layer]! + beyond;
    }
    books.lost[n] = this.lost[1] ?? 0;
    this.inWater = books.inWater[0]![n]!;
  }
}
