import type { TravelTime } from '../../../shared/schemas/estimate-result';
import type { LossClock } from '../loss';
import type { Weights } from '../release-profile';
import { chainagesKm, tableStepKm, travelRow } from '../travel-times';
import { placeOn, type PathPlace, type RiverPath } from './path';
import { bottomKm, topKm } from './reach-state';
import type { RiverGridding } from './river-grid';
import { ageWindow, forEachBirth, sectionDensity } from './river-response';

/** Times at which the passage of one place is asked. */
const SAMPLES = 96;
const BEFORE_SIGMA = 5;
const AFTER_SIGMA = 8;
/** exp(-25) = 1e-11: what is farther from its passage adds nothing. */
const FAR_EXPONENT = 25;

/** Passage of the section mean by chainage, on every reach a release comes through. */
export function riverTravelTimes(gridding: RiverGridding, weights: Weights, horizonS: number): TravelTime[] {
  const { paths, states } = gridding;
  const lengthKm = Math.max(...paths.map((path) => path.segments.reduce((sum, segment) => sum + segment.fromKm - segment.toKm, 0)));
  const everyKm = tableStepKm(lengthKm);
  return states.flatMap(({ reach }) => {
    const entries = paths.flatMap((path) => path.bySegment.get(reach.id)?.fromKm ?? []);
    if (entries.length === 0) return [];
    return chainagesKm(Math.min(topKm(reach), Math.max(...entries)), bottomKm(reach), everyKm).flatMap((km) => rowAt(gridding, weights, reach.id, km, horizonS) ?? []);
  });
}

function rowAt(gridding: RiverGridding, weights: Weights, reachId: string, km: number, horizonS: number): TravelTime | null {
  let [fromS, toS] = [horizonS, 0];
  for (const path of gridding.paths) {
    const place = placeOn(path, reachId, km);
    if (!place || weights[path.release.index] === 0) continue;
    const sigma = Math.sqrt(path.startVarianceS2 + 2 * place.kappaS * Math.max(place.travelS, place.kappaS));
    const { startS, stopS } = path.release.profile;
    fromS = Math.min(fromS, startS + place.travelS - BEFORE_SIGMA * sigma);
    toS = Math.max(toS, stopS + place.travelS + AFTER_SIGMA * sigma);
  }
  const first = gridding.paths.reduce((least, path) => Math.min(least, path.release.profile.startS), horizonS);
  fromS = Math.max(first, fromS);
  toS = Math.min(horizonS, toS);
  if (toS <= fromS) return null;
  const timesS = Float64Array.from({ length: SAMPLES + 1 }, (_, i) => fromS + ((toS - fromS) * i) / SAMPLES);
  const means = timesS.map((tS) => gridding.paths.reduce((sum, path) => sum + (weights[path.release.index]! === 0 ? 0 : weights[path.release.index]! * meanAt(path, placeOn(path, reachId, km), tS, gridding.loss)), 0));
  const row = travelRow(reachId, km, timesS, means);
  // Beyond the times asked the passage is over.
  return row && row.endS === null && toS < horizonS ? { ...row, endS: toS } : row;
}

/** Section mean per kilogram of one release. */
function meanAt(path: RiverPath, place: PathPlace | null, tS: number, loss: LossClock | null): number {
  const { profile } = path.release;
  if (!place || tS <= profile.startS) return 0;
  const survival = (bornS: number): number => (loss ? Math.exp(loss.exposure(bornS) - loss.exposure(tS)) : 1);
  if (profile.isInstant) return sectionDensity(place, path.startVarianceS2, tS - profile.startS) * survival(profile.startS);
  const window = ageWindow(place, path.startVarianceS2, FAR_EXPONENT);
  const from = window ? Math.max(profile.startS, tS - window.to) : tS;
  const to = window ? Math.min(profile.stopS, tS - window.from) : tS;
  let sum = 0;
  if (to > from)
    forEachBirth(from, to, (bornS) => Math.sqrt(path.startVarianceS2 + 2 * place.kappaS * (tS - bornS)), (bornS, share) => {
      sum += share * profile.rate(bornS) * sectionDensity(place, path.startVarianceS2, tS - bornS) * survival(bornS);
    });
  return sum;
}
