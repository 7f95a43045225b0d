import type { EstimateReceptor } from '../../../shared/schemas/estimate';
import type { WorkingLine } from '../../../shared/schemas/estimate-result';
import { durationText, lengthText, sig } from '../format';
import type { BoundedFacts, BoundedPlace } from './bounded-solver';
import { nearestCell } from './cell-grid';
import { velocityAt } from './flow-modes';
import { spreadLine } from '../open/spread-working';

/** Working common to all receptors: grid, current, streams, tide, spreading. */
export function boundedRunWorking({ open, plan, figures }: BoundedFacts): WorkingLine[] {
  const { water, input } = open;
  const { grid, thicknessM, streams } = plan.water;
  const wet = thicknessM.filter((thickness) => thickness > 0);
  const mean = wet.reduce((sum, thickness) => sum + thickness, 0) / wet.length;
  const lines: WorkingLine[] = [
    { label: 'Grid', formula: 'square cells, water where the centre is', substituted: `${wet.length} cells of ${lengthText(grid.dxM)}; ${figures.steps} steps in ${durationText(input.doc.horizonS)}, at most ${sig(figures.worstCourant, 2)} of a cell's water leaving in one`, value: grid.dxM, unit: 'm', source: 'as fine as the work allows' },
    { label: 'Depth mixed over', formula: 'h = the lesser of mixing depth and depth', substituted: `mean ${sig(mean)} m${water.depthPoints?.length ? `, from ${water.depthPoints.length} soundings by inverse squared distance` : ''}`, value: mean, unit: 'm', source: water.depthPoints?.length ? 'Shepard 1968' : water.coefficientNote || 'water register' },
    {
      label: 'Current consistent with mass',
      formula: 'u = first guess − grad p, with div(h u) = −dη/dt and no flow through land',
      substituted: `fastest ${sig(plan.fastestMps, 3)} m/s; the books of water close in every cell to ${sig(plan.flow.modes.worstDivergence, 2)} of the largest discharge`,
      value: plan.fastestMps,
      unit: 'm/s',
      source: 'Chorin 1968; Sasaki 1970',
    },
  ];
  if (streams.length > 0)
    lines.push({ label: 'Streams', formula: 'Q through the shore nearest to each', substituted: streams.map((stream) => `${stream.name} ${sig(stream.dischargeM3s)} m³/s`).join('; '), value: streams.reduce((sum, stream) => sum + stream.dischargeM3s, 0), unit: 'm³/s', source: 'stated' });
  if (plan.flow.modes.rise) lines.push(tideLine(plan));
  if (plan.flow.modes.fits.length > 0) lines.push(measuredLine(plan));
  lines.push(
    spreadLine(water, { agedFormula: 'K = ½ dσ²/dt, σ² = f · ½ · 0.0108 t^2.34 cm²', agedNote: '; the age is the mean of what has been released', constantFormula: 'K = R diag(K_L, K_T) Rᵀ as exchanges between cells', turning: 'axes turning with the current of each cell' }),
  );
  return lines;
}

function tideLine({ water, flow }: BoundedFacts['plan']): WorkingLine {
  const { amplitudeM, periodS } = flow.level;
  const areaM2 = water.grid.isWater.reduce((sum, wet) => sum + wet, 0) * water.grid.dxM ** 2;
  const dischargeM3s = (2 * Math.PI * amplitudeM * areaM2) / periodS;
  return { label: 'Tide through the open edge', formula: 'Q = A dη/dt', substituted: `range ${sig(2 * amplitudeM)} m over ${sig(areaM2 / 1e6)} km²: at most ${sig(dischargeM3s)} m³/s`, value: dischargeM3s, unit: 'm³/s', source: 'volume of the rising level' };
}

function measuredLine({ flow }: BoundedFacts['plan']): WorkingLine {
  const { fits } = flow.modes;
  const worst = Math.max(...fits.map((fit) => Math.hypot(fit.eastMps - fit.gotEastMps, fit.northMps - fit.gotNorthMps)));
  return { label: 'Measured currents', formula: 'differences spread over ever shorter reaches until the consistent current meets them', substituted: `${fits.length} points, met to ${sig(worst, 2)} m/s`, value: worst, unit: 'm/s', source: 'Cressman 1959' };
}

/** How the likely peak at a receptor came about. */
export function boundedReceptorWorking({ plan, open }: BoundedFacts, receptor: EstimateReceptor, place: BoundedPlace, peakS: number): WorkingLine[] {
  const { water, flow } = plan;
  const out = new Float64Array(2);
  flow.meanOver(peakS - 60, peakS + 60);
  velocityAt(water, flow.now, nearestCell(water.grid, place.xM, place.yM)!.cell, out);
  const toward = ((Math.atan2(out[0]!, out[1]!) * 180) / Math.PI + 360) % 360;
  return [
    { label: `Distance to ${receptor.name}`, formula: 'straight line from the nearest release', substituted: lengthText(place.distanceM), value: place.distanceM, unit: 'm', source: 'positions' },
    {
      label: 'Concentration per kilogram',
      formula: '∂(hC)/∂t + div(h u C) = div(h K grad C) − k h C, read between the cells round the place',
      substituted: `${place.cells.length} cells of ${lengthText(water.grid.dxM)}; current there at the peak ${sig(Math.hypot(out[0]!, out[1]!), 2)} m/s toward ${sig(toward, 3)}°; ${open.input.releases.length} release${open.input.releases.length > 1 ? 's' : ''} added up`,
      value: null,
      unit: '1/m³',
      source: 'finite volumes, van Leer 1974; Shu & Osher 1988',
    },
  ];
}
