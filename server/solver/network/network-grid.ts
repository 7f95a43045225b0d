import type { ChannelGrid, ChannelGridPart } from '../../../shared/frames';
import type { Weights } from '../release-profile';
import type { DistanceTime, GriddedField } from '../types';
import type { PathReach } from './path-flow';
import type { Snapshot } from './recorder';
import type { NetworkRun } from './run';

const MOST_NODES = 500;

/** One release's sections of one reach at one time, x counted from the head of the reach. */
type Strip = { readonly run: NetworkRun; readonly snapshot: Snapshot; readonly rows: readonly number[]; readonly reach: PathReach };

const snapshotAt = (run: NetworkRun, tS: number): Snapshot | undefined => run.snapshots.find((item) => Math.abs(item.timeS - tS) < 1e-6 * Math.max(1, Math.abs(tS)));

/** Every reach with the strips that lie on it. */
function stripsByReach(runs: readonly NetworkRun[], tS: number): Map<string, Strip[]> {
  const out = new Map<string, Strip[]>();
  for (const run of runs) {
    const snapshot = snapshotAt(run, tS);
    if (!snapshot) continue;
    for (const reach of run.flow.reaches) {
      const rows: number[] = [];
      snapshot.xM.forEach((x, i) => {
        if (x >= reach.x0 && x <= reach.x1) rows.push(i);
      });
      if (rows.length === 0) continue;
      const id = reach.state.reach.id;
      out.set(id, [...(out.get(id) ?? []), { run, snapshot, rows, reach }]);
    }
  }
  return out;
}

/** Value of a strip at x in its reach and a tube: straight between sections, level to the reach's ends where the cloud goes on. */
function stripValue({ run, snapshot, rows, reach }: Strip, xM: number, tube: number): number {
  const n = run.tubes.count;
  const at = (k: number): number => snapshot.values[rows[k]! * n + tube]!;
  const x = (k: number): number => snapshot.xM[rows[k]!]! - reach.x0;
  const last = rows.length - 1;
  if (xM < x(0)) return rows[0] === 0 ? 0 : at(0);
  if (xM > x(last)) return rows[last] === snapshot.xM.length - 1 ? 0 : at(last);
  let low = 0;
  let high = last;
  while (low < high) {
    const mid = (low + high + 1) >> 1;
    if (x(mid) <= xM) low = mid;
    else high = mid - 1;
  }
  if (low === last) return at(last);
  return at(low) + ((at(low + 1) - at(low)) * (xM - x(low))) / (x(low + 1) - x(low));
}

export type NetworkGridding = { readonly runs: readonly NetworkRun[]; readonly solubility: number };

/** Concentrations along and across every reach that a cloud touches at one of the frame times. */
export function networkFieldAt({ runs, solubility }: NetworkGridding, tS: number, weights: Weights): GriddedField {
  const strips = [...stripsByReach(runs, tS)];
  const n = runs[0]!.tubes.count;
  const parts: ChannelGridPart[] = strips.map(([reachId, items]) => ({ reachId, chainageKm: nodesOf(items).map((x) => topKmOf(items) - x / 1_000), nAcross: n }));
  const values = new Float64Array(parts.reduce((sum, part) => sum + part.chainageKm.length * n, 0));
  let at = 0;
  strips.forEach(([, items], k) => {
    for (const km of parts[k]!.chainageKm) {
      const x = (topKmOf(items) - km) * 1_000;
      for (let j = 0; j < n; j++, at++) {
        let sum = 0;
        for (const strip of items) sum += weights[strip.run.release.index]! * Math.min(strip.run.release.capPerKg, stripValue(strip, x, j));
        values[at] = Math.min(sum, solubility);
      }
    }
  });
  return { grid: { kind: 'channel', parts } satisfies ChannelGrid, values };
}

const topKmOf = (strips: readonly Strip[]): number => strips[0]!.reach.state.reach.centreline[0]![2];

/** The sections of the strip that has most, from the first to the last place any strip touches. */
function nodesOf(strips: readonly Strip[]): number[] {
  const all = strips.flatMap(({ snapshot, rows, reach }) => rows.map((i) => snapshot.xM[i]! - reach.x0)).sort((a, b) => a - b);
  const least = Math.max(0.5, (all[all.length - 1]! - all[0]!) / MOST_NODES);
  const out: number[] = [];
  for (const x of all) if (out.length === 0 || x - out[out.length - 1]! >= least) out.push(x);
  const { lengthM } = strips[0]!.reach;
  // A cloud that goes on beyond an end of the reach is drawn up to it.
  if (strips.some(({ rows }) => rows[0] !== 0) && out[0]! > 0.5) out.unshift(0);
  if (strips.some(({ rows, snapshot }) => rows[rows.length - 1] !== snapshot.xM.length - 1) && lengthM - out[out.length - 1]! > 0.5) out.push(lengthM);
  if (out.length === 1) out.push(Math.min(lengthM, out[0]! + 1));
  return out;
}

/**
 * Largest value up to the last of the times at the fixed sections of every path. One release: over all steps. Several: no less than
 * each alone at any time, and than their sum at the times of the frames.
 */
export function networkEnvelope(gridding: NetworkGridding, frameTimesS: readonly number[], weights: Weights): GriddedField {
  const { runs, solubility } = gridding;
  const n = runs[0]!.tubes.count;
  const untilS = frameTimesS[frameTimesS.length - 1]!;
  const highest = new Map(runs.map((run) => [run, run.envelope.upTo(untilS)] as const));
  const sections = new Map<string, Set<number>>();
  for (const run of runs)
    run.envelope.stations.forEach(({ xM, reach }, i) => {
      if (highest.get(run)!.subarray(i * n, (i + 1) * n).every((value) => value === 0)) return;
      const { state, x0 } = run.flow.reaches[reach]!;
      sections.set(state.reach.id, (sections.get(state.reach.id) ?? new Set()).add(xM - x0));
    });
  const parts = [...sections].map(([reachId, places]) => ({ reachId, xs: [...places].sort((a, b) => a - b) })).filter(({ xs }) => xs.length > 1);
  const values = new Float64Array(parts.reduce((sum, { xs }) => sum + xs.length * n, 0));
  let at = 0;
  for (const { reachId, xs } of parts)
    for (const x of xs) {
      for (let j = 0; j < n; j++) for (const run of runs) values[at + j] = Math.max(values[at + j]!, weights[run.release.index]! * Math.min(run.release.capPerKg, envelopeValue(run, highest.get(run)!, reachId, x, j)));
      at += n;
    }
  if (runs.length > 1) for (const tS of frameTimesS) addSums(values, parts, stripsByReach(runs, tS), weights, n);
  for (let i = 0; i < values.length; i++) values[i] = Math.min(values[i]!, solubility);
  const topOf = (reachId: string): number => runs.flatMap((run) => run.flow.reaches).find((reach) => reach.state.reach.id === reachId)!.state.reach.centreline[0]![2];
  return { grid: { kind: 'channel', parts: parts.map(({ reachId, xs }) => ({ reachId, chainageKm: xs.map((x) => topOf(reachId) - x / 1_000), nAcross: n })) }, values };
}

function addSums(values: Float64Array, parts: readonly { reachId: string; xs: number[] }[], strips: Map<string, Strip[]>, weights: Weights, n: number): void {
  let at = 0;
  for (const { reachId, xs } of parts)
    for (const x of xs) {
      for (let j = 0; j < n; j++, at++) {
        let sum = 0;
        for (const strip of strips.get(reachId) ?? []) sum += weights[strip.run.release.index]! * Math.min(strip.run.release.capPerKg, stripValue(strip, x, j));
        if (sum > values[at]!) values[at] = sum;
      }
    }
}

/** The envelope of one run at x in a reach, straight between its sections. */
function envelopeValue(run: NetworkRun, values: Float64Array, reachId: string, xM: number, tube: number): number {
  const { stations } = run.envelope;
  const n = run.tubes.count;
  const r = run.flow.reaches.findIndex((reach) => reach.state.reach.id === reachId);
  if (r < 0) return 0;
  const x = xM + run.flow.reaches[r]!.x0;
  let low = -1;
  for (let i = 0; i < stations.length; i++) if (stations[i]!.reach === r && stations[i]!.xM <= x + 1e-9) low = i;
  if (low < 0) return 0;
  const next = stations[low + 1];
  const here = values[low * n + tube]!;
  if (!next || next.reach !== r) return here;
  return here + ((values[(low + 1) * n + tube]! - here) * (x - stations[low]!.xM)) / (next.xM - stations[low]!.xM);
}

/** Section means by frame time and chainage along the path of the first release. */
export function networkDistanceTime({ runs, solubility }: NetworkGridding, timesS: readonly number[], weights: Weights, places: number): DistanceTime {
  const { flow, sourceM, tubes } = runs[0]!;
  const all = timesS.map((tS) => stripsByReach(runs, tS));
  const farthest = Math.min(flow.endM, runs[0]!.snapshots.reduce((most, { xM }) => Math.max(most, xM[xM.length - 1] ?? 0), sourceM + 1));
  const nearest = flow.isTidal ? Math.max(0, runs[0]!.snapshots.reduce((least, { xM }) => Math.min(least, xM[0] ?? Infinity), sourceM)) : sourceM;
  const xs = Array.from({ length: places }, (_, i) => nearest + ((farthest - nearest) * i) / (places - 1));
  const reaches = xs.map((x) => flow.reaches[flow.reachAt(Math.min(x, flow.endM - 1e-6))]!);
  const values = all.map((strips) =>
    xs.map((x, i) => {
      const reach = reaches[i]!;
      let sum = 0;
      for (const strip of strips.get(reach.state.reach.id) ?? [])
        for (let j = 0; j < tubes.count; j++) sum += weights[strip.run.release.index]! * tubes.share[j]! * Math.min(strip.run.release.capPerKg, stripValue(strip, x - reach.x0, j));
      return Math.min(sum, solubility);
    }),
  );
  return { timesS: [...timesS], chainageKm: xs.map((x, i) => reaches[i]!.state.reach.centreline[0]![2] - (x - reaches[i]!.x0) / 1_000), reachIds: reaches.map((reach) => reach.state.reach.id), values };
}
