import type { LossClock } from '../loss';
import type { Meter } from '../meter';
import { AdaptiveQuadrature, gaussLegendre } from '../math/quadrature';
import { steadyReleaseResponse } from '../physics/line';
import type { UnitResponse } from '../types';
import { acrossAt, isEven, type AcrossNodes } from './across';
import type { PathPlace, RiverPath } from './path';

/** exp(-36) = 2e-16: ages whose exponent is larger add nothing. */
const FAR_EXPONENT = 36;
/** The same for grids: 1e-7 of the peak. */
const GRID_EXPONENT = 16;

/**
 * Resident concentration over the section mean per kilogram, at one place on the river's line:
 *   C = M/Q (2 pi v)^(-1/2) exp(-(T - a)^2 / 2 v),  v = v0 + 2 k a,
 * T travel time, a age, k mean of D/U^2 on the way (s). In an even reach this is exactly the slug solution
 * M / (A sqrt(4 pi D t)) exp(-(x - U t)^2 / 4 D t); over several reaches the passage keeps the summed mean and variance
 * and the integral M/Q. Sources: Fischer et al. 1979, section 2.3; cumulants of independent reaches add.
 */
export const sectionDensity = (place: PathPlace, startVarianceS2: number, ageS: number): number => {
  const v = startVarianceS2 + 2 * place.kappaS * ageS;
  return Math.exp(-((place.travelS - ageS) ** 2) / (2 * v)) / (Math.sqrt(2 * Math.PI * v) * place.segment.state.dischargeM3s);
};

/** Ages between which the exponent is below `limit`; null where there are none. */
export function ageWindow(place: PathPlace, startVarianceS2: number, limit: number): { from: number; to: number } | null {
  const half = place.travelS + 2 * place.kappaS * limit;
  const disc = half * half - place.travelS ** 2 + 2 * limit * startVarianceS2;
  if (disc <= 0 || half + Math.sqrt(disc) <= 0) return null;
  return { from: Math.max(0, half - Math.sqrt(disc)), to: half + Math.sqrt(disc) };
}

/** Transverse spread of matter of the given age at a place; below a confluence it goes by the place alone. */
export const tauAt = (place: PathPlace, ageS: number): number => (place.segment.across.kind === 'source' ? place.tauPerS * ageS : place.tau);

/** Closed form for a steady release where section and loss allow it: difference of two J functions in travel time. */
function steadyMean(place: PathPlace, startS: number, stopS: number, tS: number, rate: number): number {
  const response = (sinceS: number): number => steadyReleaseResponse(place.travelS, sinceS, 1, place.kappaS, rate);
  return Math.max(0, response(tS - startS) - response(tS - stopS)) / ((stopS - startS) * place.segment.state.dischargeM3s);
}

const canUseClosedForm = (path: RiverPath, place: PathPlace, isEvenThere: boolean): boolean =>
  path.release.profile.isSteady && path.startVarianceS2 === 0 && (isEvenThere || place.segment.across.kind === 'modes');

/** Concentration at a place and a point across against time, per kilogram of one release. */
export function riverResponse(path: RiverPath, place: PathPlace, eta: number, loss: LossClock, tolerance: number, meter: Meter): UnitResponse {
  const { profile, capPerKg } = path.release;
  const v0 = path.startVarianceS2;
  const { across } = place.segment;
  const window = ageWindow(place, v0, FAR_EXPONENT);
  const scaleS = Math.sqrt(v0 + 2 * place.kappaS * Math.max(place.travelS, place.kappaS));
  const features = [...new Set([profile.startS, profile.stopS])].map((startS) => ({ atS: startS + Math.max(0, place.travelS), scaleS }));
  const unit = (ageS: number, bornS: number, withLoss: boolean): number =>
    sectionDensity(place, v0, ageS) * acrossAt(across, eta, tauAt(place, ageS)) * (withLoss ? Math.exp(loss.exposure(bornS) - loss.exposure(bornS + ageS)) : 1);
  if (profile.isInstant)
    return {
      features,
      at(tS, withLoss) {
        meter.count(1);
        return tS <= profile.startS ? 0 : Math.min(capPerKg, unit(tS - profile.startS, profile.startS, withLoss));
      },
    };
  const isClosed = canUseClosedForm(path, place, window !== null && isEven(across, tauAt(place, window.from), 1e-12));
  const quadrature = new AdaptiveQuadrature(meter);
  const width = (a: number, b: number, tS: number): boolean => b - a > 3 * Math.sqrt(v0 + 2 * place.kappaS * (tS - (a + b) / 2)) && b - a > 1e-6;
  return {
    features,
    at(tS, withLoss) {
      if (tS <= profile.startS || window === null) return 0;
      const rate = withLoss ? loss.constantRatePerS : 0;
      if (isClosed && rate !== null) {
        meter.count(2);
        return Math.min(capPerKg, steadyMean(place, profile.startS, profile.stopS, tS, rate) * acrossAt(across, eta, place.tau));
      }
      const from = Math.max(profile.startS, tS - window.to);
      const to = Math.min(profile.stopS, tS - window.from);
      if (to <= from) return 0;
      const cuts = [from, ...profile.knotsS.filter((t) => t > from && t < to), to];
      const value = quadrature.integrate((bornS) => profile.rate(bornS) * unit(tS - bornS, bornS, withLoss), cuts, tolerance, (a, b) => (width(a, b, tS) ? 'split' : 'take'));
      return Math.min(capPerKg, value);
    },
  };
}

const POINTS = gaussLegendre(6);

/** Adds the values from bank to bank at a place and time, times `weight`, to `out[at...]`; to 1e-6 of the peak. */
export function addAcross(out: Float64Array, at: number, nodes: AcrossNodes, path: RiverPath, place: PathPlace, tS: number, weight: number, loss: LossClock | null): void {
  const { profile } = path.release;
  const { across } = place.segment;
  const survival = (bornS: number): number => (loss ? Math.exp(loss.exposure(bornS) - loss.exposure(tS)) : 1);
  if (profile.isInstant) {
    const ageS = tS - profile.startS;
    const density = sectionDensity(place, path.startVarianceS2, ageS);
    if (density > 0) nodes.add(out, at, across, tauAt(place, ageS), weight * density * survival(profile.startS));
    return;
  }
  const window = ageWindow(place, path.startVarianceS2, GRID_EXPONENT);
  if (!window) return;
  const from = Math.max(profile.startS, tS - window.to);
  const to = Math.min(profile.stopS, tS - window.from);
  if (to <= from) return;
  const rate = loss ? loss.constantRatePerS : 0;
  if (rate !== null && canUseClosedForm(path, place, isEven(across, tauAt(place, tS - to), 1e-7))) {
    const mean = weight * steadyMean(place, profile.startS, profile.stopS, tS, rate);
    if (across.kind === 'modes') return nodes.add(out, at, across, place.tau, mean);
    for (let j = 0; j < nodes.count; j++) out[at + j]! += mean;
    return;
  }
  forEachBirth(from, to, (bornS) => Math.sqrt(path.startVarianceS2 + 2 * place.kappaS * (tS - bornS)), (bornS, share) => {
    const ageS = tS - bornS;
    const scale = weight * share * profile.rate(bornS) * sectionDensity(place, path.startVarianceS2, ageS) * survival(bornS);
    if (scale > 0) nodes.add(out, at, across, tauAt(place, ageS), scale);
  });
}

/** Gauss-Legendre points over release times in stretches of three standard deviations of the passage, at most 24 stretches. */
export function forEachBirth(from: number, to: number, sigma: (bornS: number) => number, use: (bornS: number, share: number) => void): void {
  const least = (to - from) / 24;
  // Backwards from the youngest, whose passage is the sharpest.
  for (let end = to; end > from + 1e-9 * (to - from); ) {
    const begin = Math.max(from, end - Math.max(least, 3 * sigma(end)));
    for (let k = 0; k < POINTS.x.length; k++) use((begin + end) / 2 + ((end - begin) / 2) * POINTS.x[k]!, ((end - begin) / 2) * POINTS.w[k]!);
    end = begin;
  }
}
