import type { PlaneGrid } from '../../../shared/frames';
import { toPlane } from '../../../shared/geo';
import type { Box, EstimateReceptor, OpenWater } from '../../../shared/schemas/estimate';
import type { Check, WorkingLine } from '../../../shared/schemas/estimate-result';
import { SolverInputError } from '../errors';
import { durationText, lengthText, sig } from '../format';
import { clearLand, isInPlaneArea, nearestShore, planeArea, type PlaneArea } from '../open/area-mask';
import { RECEPTOR_SNAP_M } from '../open/open-solver';
import type { Weights } from '../release-profile';
import type { Books, GriddedField, PreparedField, ReceptorSite, RunInput, Solver } from '../types';
import { BoxRelease } from './box-response';

/** A small basin taken as stirred at every moment and renewed by tide and streams. */
export const boxSolver: Solver = { name: 'stirred basin', prepare: prepareBox };

/** Nodes along the longer side of the drawn basin. */
const NODES = { full: 96, preview: 48 };
/** A basin flushed faster than it is stirred is not one box: renewals a tide above which that is told. */
const MOST_SHARE_A_TIDE = 0.5;

type Flushing = { readonly exchangeM3: number; readonly perS: number; readonly eFoldingS: number };

/**
 * Renewal of a stirred tidal basin: each tide takes range * area out and brings the same back, of which the return
 * fraction is water that had just left; streams add their discharge. f = (range * area * (1 - b)/period + Q)/volume.
 * Source: the tidal prism method, Fischer et al. 1979, section 7.4; return fraction, Sanford, Boicourt & Rives 1992,
 * J. Waterw. Port Coast. Ocean Eng. 118:635.
 */
export function flushingOf(box: Box): Flushing {
  const exchangeM3 = box.tidalRangeM * box.surfaceAreaM2 * (1 - box.returnFraction);
  const perS = (exchangeM3 / box.periodS + (box.dischargeM3s ?? 0)) / box.volumeM3;
  return { exchangeM3, perS, eFoldingS: perS > 0 ? 1 / perS : Infinity };
}

function prepareBox(input: RunInput): PreparedField {
  const { doc } = input;
  const water = doc.water as OpenWater;
  const { box } = water;
  if (!box) throw new SolverInputError([{ path: 'water.box', message: `${water.name} has no figures for a stirred basin: give volume, surface, tidal range and return fraction, or choose another solver` }]);
  if (box.tidalRangeM * box.surfaceAreaM2 > box.volumeM3)
    throw new SolverInputError([{ path: 'water.box.tidalRangeM', message: `A range of ${box.tidalRangeM} m over ${sig(box.surfaceAreaM2)} m² is more water than the basin holds (${sig(box.volumeM3)} m³): give the volume at mean level, or a smaller range` }]);
  const flushing = flushingOf(box);
  const [originLon, originLat] = doc.releases[0]!.position;
  const area = planeArea(water.area, originLon, originLat);
  const made = (withLoss: boolean): BoxRelease[] => input.releases.map(({ profile }) => new BoxRelease(profile, flushing.perS, withLoss ? input.loss : null, doc.horizonS));
  const plain = made(false);
  const lossy = made(true);
  const applied = doc.substance.applyLoss ? lossy : plain;
  const strength = (r: number, tS: number, withLoss: boolean): number => Math.min(input.releases[r]!.capPerKg, (withLoss ? lossy : plain)[r]!.at(tS).inWater / box.volumeM3);
  const valueAt = (tS: number, weights: Weights): number => Math.min(doc.substance.solubilityKgM3 ?? Infinity, weights.reduce((sum, weight, r) => sum + weight * strength(r, tS, doc.substance.applyLoss), 0));
  const highest = (untilS: number, weights: Weights): number => {
    // The content rises only while something is released: its peaks lie within releases or at their ends, for steady ones exactly there.
    const times = input.releases.flatMap(({ profile }) => Array.from({ length: 65 }, (_, n) => profile.startS + ((profile.stopS - profile.startS) * n) / 64 + (profile.isInstant ? 1e-6 * n : 0)));
    return [...times, untilS].filter((tS) => tS <= untilS).reduce((most, tS) => Math.max(most, valueAt(tS, weights)), 0);
  };
  const field = (value: number): GriddedField => uniform(area, { originLon, originLat }, NODES[input.isPreview ? 'preview' : 'full'], value);
  const toXy = (receptor: EstimateReceptor): [number, number] => toPlane({ originLon, originLat }, receptor.position);
  return {
    receptor: (_index, receptor) => siteOf(input, water, area, toXy(receptor), receptor, strength),
    gridAt: (tS, weights) => field(valueAt(tS, weights)),
    envelope: (timesS, weights) => field(highest(timesS[timesS.length - 1]!, weights)),
    distanceTime: () => null,
    books: (tS, weights) => booksOf(applied, tS, weights),
    working: workingOf(input, box, flushing),
    checks: checksOf(water, box, flushing),
  };
}

function booksOf(releases: readonly BoxRelease[], tS: number, weights: Weights): Books {
  const out: Books = { released: 0, inWater: 0, lost: 0, left: 0 };
  releases.forEach((release, r) => {
    const books = release.at(tS);
    for (const name of ['released', 'inWater', 'lost', 'left'] as const) out[name] += weights[r]! * books[name];
  });
  return out;
}

/** One value over the drawn basin, 0 outside it. */
function uniform(area: PlaneArea, origin: { originLon: number; originLat: number }, nodes: number, value: number): GriddedField {
  const dxM = Math.max(area.x1 - area.x0, area.y1 - area.y0) / (nodes - 3);
  const nx = Math.ceil((area.x1 - area.x0) / dxM) + 3;
  const ny = Math.ceil((area.y1 - area.y0) / dxM) + 3;
  const grid: PlaneGrid = { kind: 'plane', ...origin, x0M: area.x0 - dxM, y0M: area.y0 - dxM, dxM, dyM: dxM, nx, ny };
  const values = new Float64Array(nx * ny).fill(value);
  clearLand(values, grid, area);
  return { grid, values };
}

function siteOf(input: RunInput, water: OpenWater, area: PlaneArea, [x, y]: [number, number], receptor: EstimateReceptor, strength: (r: number, tS: number, withLoss: boolean) => number): ReceptorSite {
  const off = isInPlaneArea(area, x, y) ? 0 : nearestShore(area, x, y).distanceM;
  const distanceM = Math.hypot(x, y);
  if (off > RECEPTOR_SNAP_M) {
    const check: Check = {
      code: 'outside-basin',
      severity: 'stop',
      title: 'Outside the basin',
      detail: `${receptor.name} lies ${lengthText(off)} outside ${water.name}; the stirred basin tells the concentration within, and how much leaves it.`,
      remedy: 'Estimate it on the water outside, with what leaves the basin as the release.',
      receptorId: receptor.id,
    };
    return { distanceM, responses: input.releases.map(() => null), reason: check.title, checks: [check], working: () => [] };
  }
  const responses = input.releases.map(({ profile }, r) => ({
    features: [profile.startS, profile.stopS].map((atS) => ({ atS, scaleS: Math.max(60, (profile.stopS - profile.startS) / 8) })),
    at: (tS: number, withLoss: boolean) => strength(r, tS, withLoss),
  }));
  const working = (peakS: number): WorkingLine[] => [
    { label: `Concentration in the basin at the peak, ${receptor.name}`, formula: 'C = M/V', substituted: `${durationText(peakS)} after T0; the same everywhere in the basin`, value: null, unit: '', source: 'stirred basin' },
  ];
  return { distanceM, responses, reason: '', checks: [], working };
}

function workingOf(input: RunInput, box: Box, flushing: Flushing): WorkingLine[] {
  const tides = flushing.eFoldingS / box.periodS;
  return [
    { label: 'Exchange each tide', formula: 'V_ex = range · area · (1 − b)', substituted: `${sig(box.tidalRangeM)} m · ${sig(box.surfaceAreaM2)} m² · (1 − ${sig(box.returnFraction)})`, value: flushing.exchangeM3, unit: 'm³', source: 'tidal prism, Fischer et al. 1979, section 7.4' },
    {
      label: 'Time for the content to fall to 37 %',
      formula: 'T = V / (V_ex/period + Q)',
      substituted: Number.isFinite(tides) ? `${sig(box.volumeM3)} m³ / (${sig(flushing.exchangeM3)} m³ in ${durationText(box.periodS)} + ${sig(box.dischargeM3s ?? 0)} m³/s): ${sig(tides, 3)} tides, ${durationText(flushing.eFoldingS)}` : 'no exchange: nothing leaves',
      value: Number.isFinite(tides) ? flushing.eFoldingS : null,
      unit: 's',
      source: 'completely mixed basin',
    },
    {
      label: 'Mixed concentration of all that is released',
      formula: 'C₀ = M/V',
      substituted: `${sig(input.weights.likely.reduce((sum, weight) => sum + weight, 0))} / ${sig(box.volumeM3)} m³, before any leaves`,
      value: input.weights.likely.reduce((sum, weight) => sum + weight, 0) / box.volumeM3,
      unit: input.doc.substance.measure === 'count' ? 'counts/m³' : 'kg/m³',
      source: '',
    },
  ];
}

function checksOf(water: OpenWater, box: Box, flushing: Flushing): Check[] {
  const out: Check[] = [
    {
      code: 'stirred',
      severity: 'note',
      title: 'Taken as stirred',
      detail: `Every place in ${water.name} has the same concentration at a time; near the release it is higher at first.`,
      remedy: 'For where and when within the basin, solve it on a grid.',
      receptorId: null,
    },
  ];
  const share = flushing.perS * box.periodS;
  if (share > MOST_SHARE_A_TIDE)
    out.push({ code: 'flushed-fast', severity: 'warn', title: 'Flushed faster than stirred', detail: `${sig(100 * share, 3)} % of the volume is renewed each tide.`, remedy: 'The basin is more a bay than a box: solve it on a grid with an open edge.', receptorId: null });
  if (flushing.perS === 0)
    out.push({ code: 'not-flushed', severity: 'warn', title: 'Nothing leaves the basin', detail: `Range ${sig(box.tidalRangeM)} m, return fraction ${sig(box.returnFraction)}, streams ${sig(box.dischargeM3s ?? 0)} m³/s.`, remedy: 'Give a tide, a lower return fraction or a discharge if water is exchanged.', receptorId: null });
  return out;
}
