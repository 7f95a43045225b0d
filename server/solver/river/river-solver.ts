import type { EstimateReceptor, RiverWater } from '../../../shared/schemas/estimate';
import { riverReceptorChecks, riverRunChecks } from '../checks/river-checks';
import { erfc } from '../math/erf';
import type { Weights } from '../release-profile';
import type { Books, PreparedField, ReceptorSite, RunInput, Solver } from '../types';
import { AcrossNodes } from './across';
import { etaOf, placeOn, riverPath, type PathPlace, type RiverPath } from './path';
import { reachStates, type ReachState } from './reach-state';
import { riverDistanceTime, riverEnvelopes, riverFieldAt, type RiverGridding } from './river-grid';
import { forEachBirth, riverResponse, sectionDensity } from './river-response';
import { riverTravelTimes } from './river-travel-times';
import { riverReceptorWorking, riverRunWorking } from './river-working';

/** Closed-form clouds in channel coordinates: along the river by travel time, across between both banks, reach by reach. */
export const riverSolver: Solver = { name: 'river, closed form in channel coordinates', prepare: prepareRiver };

export type RiverFacts = {
  readonly input: RunInput;
  readonly water: RiverWater;
  readonly states: readonly ReachState[];
  readonly paths: readonly RiverPath[];
};

/** Upstream of a release concentrations fall by this many e-foldings before they are called zero. */
const UPSTREAM_FOLDINGS = 20;

function prepareRiver(input: RunInput): PreparedField {
  const { doc } = input;
  const water = doc.water as RiverWater;
  const states = reachStates(water);
  const paths = input.releases.map((release) => riverPath(release, states));
  const facts: RiverFacts = { input, water, states, paths };
  const gridding: RiverGridding = {
    paths,
    states,
    loss: doc.substance.applyLoss ? input.loss : null,
    solubility: doc.substance.solubilityKgM3 ?? Infinity,
    across: new AcrossNodes(input.isPreview ? 9 : 13),
    widestStepM: input.isPreview ? 250 : 120,
  };
  return {
    receptor: (_index, receptor) => siteOf(facts, receptor),
    gridAt: (tS, weights) => riverFieldAt(gridding, weights, tS),
    envelope: (timesS, weights) => riverEnvelopes(gridding, weights, timesS.slice(-1))[0]!,
    envelopes: (untilS, weights) => riverEnvelopes(gridding, weights, untilS),
    distanceTime: (timesS, weights) => riverDistanceTime(gridding, weights, timesS, input.isPreview ? 80 : 160),
    books: (tS, weights) => booksAt(gridding, weights, tS),
    travelTimes: (weights) => riverTravelTimes(gridding, weights, doc.horizonS),
    working: riverRunWorking(facts),
    checks: riverRunChecks(facts),
  };
}

function siteOf(facts: RiverFacts, receptor: EstimateReceptor): ReceptorSite {
  const { input, paths } = facts;
  const { channel } = receptor;
  const none = (reason: string): ReceptorSite => ({ distanceM: null, responses: paths.map(() => null), reason, checks: [], working: () => [] });
  if (!channel) return none('Not placed on this river: give its reach, chainage and bank');
  const places = paths.map((path) => reachable(placeOn(path, channel.reachId, channel.chainageKm)));
  if (places.every((place) => place === null)) return none('Not downstream of any release');
  const nearest = places.reduce<PathPlace | null>((best, place) => (place && (!best || Math.abs(place.distanceM) < Math.abs(best.distanceM)) ? place : best), null)!;
  const eta = etaOf(channel.bank);
  return {
    distanceM: nearest.distanceM,
    responses: paths.map((path, i) => {
      const place = places[i]!;
      return place ? riverResponse(path, place, eta, input.loss, input.tolerance, input.meter) : null;
    }),
    reason: '',
    checks: riverReceptorChecks({ ...facts, receptor, place: nearest, path: paths[places.indexOf(nearest)]! }),
    working: (peakS) => riverReceptorWorking(facts, receptor, places, eta, peakS),
  };
}

const reachable = (place: PathPlace | null): PathPlace | null => (place && -place.travelS > UPSTREAM_FOLDINGS * place.kappaS ? null : place);

/** Books: the water by a sum over sections, independent of the closed form of what has passed the end of the network. */
function booksAt(gridding: RiverGridding, weights: Weights, tS: number): Books {
  const books: Books = { released: 0, inWater: 0, lost: 0, left: 0 };
  for (const path of gridding.paths) {
    const weight = weights[path.release.index]!;
    const { profile } = path.release;
    if (weight === 0 || tS <= profile.startS) continue;
    books.released += weight * profile.released(tS);
    forEachShare(path, tS, (bornS, share) => {
      const ageS = tS - bornS;
      const survival = gridding.loss ? Math.exp(gridding.loss.exposure(bornS) - gridding.loss.exposure(tS)) : 1;
      const kept = weight * share * survival;
      books.lost += weight * share * (1 - survival);
      books.left += kept * 0.5 * erfc((path.endTravelS - ageS) / Math.sqrt(2 * (path.startVarianceS2 + 2 * path.endKappaS * ageS)));
      books.inWater += kept * massAlong(path, ageS);
    });
  }
  return books;
}

function forEachShare(path: RiverPath, tS: number, use: (bornS: number, share: number) => void): void {
  const { profile } = path.release;
  if (profile.isInstant) return use(profile.startS, 1);
  const to = Math.min(tS, profile.stopS);
  const shares: [number, number][] = [];
  forEachBirth(profile.startS, to, (bornS) => Math.sqrt(path.startVarianceS2 + 2 * path.endKappaS * (tS - bornS)), (bornS, w) => shares.push([bornS, w * profile.rate(bornS)]));
  const scale = profile.released(tS) / (shares.reduce((sum, [, share]) => sum + share, 0) || 1);
  for (const [bornS, share] of shares) use(bornS, share * scale);
}

/** Sum of area times section mean over the way, per kilogram: midpoint rule in travel time, eight points a standard deviation. */
function massAlong(path: RiverPath, ageS: number): number {
  const sigma = Math.sqrt(path.startVarianceS2 + 2 * path.endKappaS * ageS) + 1e-9;
  const head = path.segments[0]!;
  const upstreamS = ((head.state.reach.centreline[0]![2] - head.fromKm) * 1_000) / head.state.speedMps;
  let sum = 0;
  for (const segment of path.segments) {
    const { state } = segment;
    const lengthS = ((segment.fromKm - segment.toKm) * 1_000) / state.speedMps;
    const from = Math.max(segment.startTravelS - (segment === head ? upstreamS : 0), ageS - 9 * sigma);
    const to = Math.min(segment.startTravelS + lengthS, ageS + 9 * sigma);
    if (to <= from) continue;
    const n = Math.ceil((8 * (to - from)) / sigma);
    for (let i = 0; i < n; i++) {
      const alongM = (from + ((to - from) * (i + 0.5)) / n - segment.startTravelS) * state.speedMps;
      const place = placeOn(path, state.reach.id, segment.fromKm - alongM / 1_000)!;
      // Area times distance is discharge times travel time.
      sum += (sectionDensity(place, path.startVarianceS2, ageS) * state.dischargeM3s * (to - from)) / n;
    }
  }
  return sum;
}
