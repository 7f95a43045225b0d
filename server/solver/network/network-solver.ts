import type { EstimateReceptor, RiverWater } from '../../../shared/schemas/estimate';
import type { Check, TravelTime } from '../../../shared/schemas/estimate-result';
import { riverReceptorChecks, riverRunChecks } from '../checks/river-checks';
import { durationText, sig } from '../format';
import type { ResolvedRelease, Weights } from '../release-profile';
import { evenRoundTimes } from '../results/isochrones';
import { placeOn, riverPath } from '../river/path';
import { reachStates } from '../river/reach-state';
import type { RiverFacts } from '../river/river-solver';
import { riverRunWorking } from '../river/river-working';
import { chainagesKm, tableStepKm, travelRow } from '../travel-times';
import type { Books, Numerics, PreparedField, ReceptorSite, RunInput, Solver } from '../types';
import { networkDistanceTime, networkEnvelope, networkFieldAt, type NetworkGridding } from './network-grid';
import { networkReceptorWorking, networkRunWorking } from './network-working';
import { PathFlow } from './path-flow';
import type { Station } from './recorder';
import { placesAlong, resolutionFor, xOf } from './resolution';
import { riverFlow, type FlowingReach } from './river-flow';
import { NetworkSimulation, type NetworkRun } from './run';
import { seriesResponse, valueAt } from './series-response';
import { Tubes } from './tubes';

/** Parcels of water followed down the river network: dead zones, stirred water, tides and changing discharge included. */
export const networkSolver: Solver = { name: 'river network, parcels of water', prepare: (input) => prepareNetwork(input) };

/** One run with the positions of its stations: receptors by their index, then places of the travel-time table. */
type Followed = { readonly run: NetworkRun; readonly receptorStation: readonly (number | null)[]; readonly places: readonly { reachId: string; chainageKm: number; station: number }[] };

/** Upstream of a release concentrations fall by this many e-foldings before they are called zero. */
const UPSTREAM_FOLDINGS = 20;
/** A receptor whose passage is told by fewer steps than this a standard deviation is named. */
const FEWEST_PER_SIGMA = 5;

/** @param refine  divides the step, to show what a finer one would change */
export function prepareNetwork(input: RunInput, refine = 1): PreparedField {
  const { doc } = input;
  const water = doc.water as RiverWater;
  const states = reachStates(water);
  const fromS = Math.min(0, ...input.releases.map((release) => release.profile.startS));
  const flowing = riverFlow(water, states, fromS, doc.horizonS);
  const facts: RiverFacts = { input, water, states, paths: input.releases.map((release) => riverPath(release, states)) };
  const followed = input.releases.map((release) => follow(facts, flowing, release, refine));
  const runs = followed.map((item) => item.run);
  const gridding: NetworkGridding = { runs, solubility: doc.substance.solubilityKgM3 ?? Infinity };
  return {
    receptor: (index, receptor) => siteOf(facts, followed, index, receptor),
    gridAt: (tS, weights) => networkFieldAt(gridding, tS, weights),
    envelope: (frameTimesS, weights) => networkEnvelope(gridding, frameTimesS, weights),
    distanceTime: (timesS, weights) => networkDistanceTime(gridding, timesS, weights, input.isPreview ? 80 : 160),
    books: (tS, weights) => booksAt(input, runs, tS, weights),
    travelTimes: (weights) => travelTable(input, followed, weights),
    working: [...riverRunWorking(facts), ...networkRunWorking(runs)],
    checks: [...riverRunChecks(facts), ...resolutionChecks(runs)],
    numerics: numericsOf(runs),
  };
}

function follow({ input, states }: RiverFacts, flowing: readonly FlowingReach[], release: ResolvedRelease, refine: number): Followed {
  const { doc } = input;
  const place = release.release.channel!;
  const first = states.find((state) => state.reach.id === place.reachId)!;
  const flow = new PathFlow(first, flowing, states);
  const sourceM = xOf(flow, place.reachId, place.chainageKm)!;
  const source = flow.reaches[flow.reachAt(sourceM)]!;
  const upstreamM = flow.isTidal ? Infinity : (UPSTREAM_FOLDINGS * source.state.dispersionM2s) / source.state.speedMps;
  const places = placesAlong(flow, doc.receptors).map((x) => (x !== null && x >= sourceM - upstreamM ? x : null));
  const resolution = resolutionFor(input, release, flow, sourceM, places.filter((x) => x !== null), refine);
  const tubes = new Tubes(resolution.tubes);
  const stations: Station[] = [];
  const watch = (station: Station): number => stations.push(station) - 1;
  const reachOf = (reachId: string): number => flow.reaches.findIndex(({ state }) => state.reach.id === reachId);
  const receptorStation = places.map((xM, i) => (xM === null ? null : watch({ xM, reach: reachOf(doc.receptors[i]!.channel!.reachId), weights: tubes.weightsAt(doc.receptors[i]!.channel!.bank) })));
  const table = tablePlaces(flow, sourceM, input.isPreview).map(({ reachId, chainageKm }) => ({ reachId, chainageKm, station: watch({ xM: xOf(flow, reachId, chainageKm)!, reach: reachOf(reachId), weights: tubes.share }) }));
  const plan = {
    release,
    flow,
    resolution,
    sourceM,
    stations,
    sections: sectionsOf(flow, sourceM, input.isPreview ? 120 : 320),
    snapshotTimesS: Array.from({ length: doc.frameCount }, (_, k) => (doc.horizonS * (k + 1)) / doc.frameCount).filter((tS) => tS > release.profile.startS),
    keepTimesS: evenRoundTimes(doc.horizonS).filter((tS) => tS > release.profile.startS),
    loss: input.loss,
    showsLoss: doc.substance.applyLoss && input.loss.kind !== 'none',
    meter: input.meter,
  };
  return { run: new NetworkSimulation(plan).run(), receptorStation, places: table };
}

function tablePlaces(flow: PathFlow, sourceM: number, isPreview: boolean): { reachId: string; chainageKm: number }[] {
  if (isPreview) return [];
  const from = flow.isTidal ? 0 : sourceM;
  const everyKm = tableStepKm((flow.endM - from) / 1_000);
  return flow.reaches.flatMap(({ state, x0, x1 }) => {
    if (x1 <= from) return [];
    const top = state.reach.centreline[0]![2];
    return chainagesKm(top - Math.max(0, from - x0) / 1_000, top - (x1 - x0) / 1_000, everyKm).map((chainageKm) => ({ reachId: state.reach.id, chainageKm }));
  });
}

/** Fixed sections for the envelope: close together near the release, both ends of every reach among them. */
function sectionsOf(flow: PathFlow, sourceM: number, count: number): { xM: number; reach: number }[] {
  const top = flow.isTidal ? 0 : flow.reaches[flow.reachAt(sourceM)]!.x0;
  const xs = new Set<number>();
  const towards = (farM: number, nodes: number): void => {
    for (let i = 0; i <= nodes; i++) xs.add(sourceM + (farM - sourceM) * (i / nodes) ** 1.6);
  };
  towards(flow.endM, count);
  if (sourceM > top) towards(top, Math.ceil(count / 5));
  const out = [...xs].map((xM) => ({ xM, reach: flow.reachAt(xM) }));
  flow.reaches.forEach(({ x0, x1 }, reach) => {
    for (const xM of [x0, x1]) if (xM >= top && !out.some((item) => item.reach === reach && Math.abs(item.xM - xM) < 1e-6)) out.push({ xM, reach });
  });
  return out.sort((a, b) => a.reach - b.reach || a.xM - b.xM);
}

function siteOf(facts: RiverFacts, followed: readonly Followed[], index: number, receptor: EstimateReceptor): ReceptorSite {
  const none = (reason: string): ReceptorSite => ({ distanceM: null, responses: followed.map(() => null), reason, checks: [], working: () => [] });
  if (!receptor.channel) return none('Not placed on this river: give its reach, chainage and bank');
  const met = followed.flatMap(({ run, receptorStation }) => {
    const station = receptorStation[index];
    return station === null || station === undefined ? [] : [{ run, xM: run.series[station]!.station.xM }];
  });
  if (met.length === 0) return none(facts.water.reaches.some((reach) => reach.tide) ? 'Out of reach of every release, tides included' : 'Not downstream of any release');
  const nearest = met.reduce((best, item) => (Math.abs(item.xM - item.run.sourceM) < Math.abs(best.xM - best.run.sourceM) ? item : best));
  return {
    distanceM: nearest.xM - nearest.run.sourceM,
    responses: followed.map(({ run, receptorStation }) => {
      const station = receptorStation[index];
      return station === null || station === undefined ? null : seriesResponse(run.timesS[0]!, run.resolution.stepS, run.series[station]!.layers, run.release.capPerKg);
    }),
    reason: '',
    checks: receptorChecks(facts, receptor, nearest.run),
    working: () => networkReceptorWorking(met),
  };
}

/** Rules that reckon with a steady seaward flow alone do not apply where the tide is part of the estimate. */
const STEADY_ONLY = new Set(['tidal-reach', 'early-regime', 'extrapolation-time', 'across-mixing']);

function receptorChecks(facts: RiverFacts, receptor: EstimateReceptor, run: NetworkRun): Check[] {
  const path = facts.paths[facts.input.releases.indexOf(run.release)]!;
  const place = placeOn(path, receptor.channel!.reachId, receptor.channel!.chainageKm);
  if (!place) return [];
  return riverReceptorChecks({ ...facts, receptor, place, path }).filter((check) => !run.flow.isTidal || !STEADY_ONLY.has(check.code));
}

function numericsOf(runs: readonly NetworkRun[]): Numerics {
  const coarsest = runs.reduce((worst, run) => (run.resolution.stepS > worst.resolution.stepS ? run : worst));
  const { stepS, steps, perSigma } = coarsest.resolution;
  return {
    // Parcels move with the water: by one of their own lengths a step.
    maxCourant: 1,
    clippedValues: 0,
    resolution: `${steps} steps of ${durationText(stepS)}, up to ${coarsest.mostParcels} parcels of ${coarsest.tubes.count} tubes${perSigma === null ? '' : `, ${sig(perSigma, 3)} steps a standard deviation of the sharpest passage`}; halving the step changes peaks by less than 0.1 % where there are 16`,
  };
}

function resolutionChecks(runs: readonly NetworkRun[]): Check[] {
  return runs.flatMap(({ release, resolution }): Check[] =>
    resolution.perSigma !== null && resolution.perSigma < FEWEST_PER_SIGMA
      ? [
          {
            code: 'resolution',
            severity: 'warn',
            title: 'The nearest receptor is told coarsely',
            detail: `The step of ${durationText(resolution.stepS)} is ${sig(1 / resolution.perSigma, 2)} of the standard deviation of the passage of ${release.release.name} at its nearest receptor.`,
            remedy: 'Shorten the estimate, or estimate the nearest receptor on its own.',
            receptorId: null,
          },
        ]
      : [],
  );
}

/** Books at the step nearest to t. */
function booksAt({ doc, loss }: RunInput, runs: readonly NetworkRun[], tS: number, weights: Weights): Books {
  const books: Books = { released: 0, inWater: 0, lost: 0, left: 0 };
  const layer = doc.substance.applyLoss && loss.kind !== 'none' ? 1 : 0;
  for (const run of runs) {
    const weight = weights[run.release.index]!;
    const n = Math.round((tS - run.timesS[0]!) / run.resolution.stepS);
    if (n < 0 || weight === 0) continue;
    const at = Math.min(n, run.resolution.steps);
    const { profile } = run.release;
    books.released += weight * (profile.isInstant ? 1 : profile.released(run.timesS[at]!));
    books.inWater += weight * run.books.inWater[layer]![at]!;
    books.left += weight * run.books.left[layer]![at]!;
    books.lost += layer === 1 ? weight * run.books.lost[at]! : 0;
  }
  return books;
}

/** Passage by chainage on every reach a release passes: sums of the section means at the steps of the finest run. */
function travelTable({ doc, loss }: RunInput, followed: readonly Followed[], weights: Weights): TravelTime[] {
  const finest = followed.reduce((best, item) => (item.run.resolution.stepS < best.run.resolution.stepS ? item : best));
  const startS = Math.min(...followed.map(({ run }) => run.timesS[0]!));
  const count = Math.ceil((doc.horizonS - startS) / finest.run.resolution.stepS);
  const timesS = Float64Array.from({ length: count + 1 }, (_, i) => startS + ((doc.horizonS - startS) * i) / count);
  const showsLoss = doc.substance.applyLoss && loss.kind !== 'none';
  const places = new Map(followed.flatMap((item) => item.places.map(({ reachId, chainageKm }) => [`${reachId} ${chainageKm}`, { reachId, chainageKm }] as const)));
  return [...places.values()].flatMap(({ reachId, chainageKm }) => {
    const means = new Float64Array(count + 1);
    for (const { run, places: own } of followed) {
      const place = own.find((item) => item.reachId === reachId && item.chainageKm === chainageKm);
      if (!place) continue;
      const { layers } = run.series[place.station]!;
      const values = layers[showsLoss ? layers.length - 1 : 0]!;
      for (let i = 0; i <= count; i++) means[i]! += weights[run.release.index]! * valueAt(values, (timesS[i]! - run.timesS[0]!) / run.resolution.stepS);
    }
    const row = travelRow(reachId, chainageKm, timesS, means);
    return row ? [row] : [];
  });
}
