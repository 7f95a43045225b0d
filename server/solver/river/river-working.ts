import type { EstimateReceptor } from '../../../shared/schemas/estimate';
import type { WorkingLine } from '../../../shared/schemas/estimate-result';
import { adviseDispersion } from '../coefficients/longitudinal';
import { durationText, lengthText, sig } from '../format';
import { acrossAt } from './across';
import type { PathPlace, RiverPath } from './path';
import type { ReachState } from './reach-state';
import type { RiverFacts } from './river-solver';
import { sectionDensity, tauAt } from './river-response';

/** Hydraulics and coefficients of every reach on the way of a release. */
export function riverRunWorking({ states, paths, water }: RiverFacts): WorkingLine[] {
  const used = states.filter((state) => paths.some((path) => path.bySegment.has(state.reach.id)));
  return used.flatMap((state) => {
    const { reach } = state;
    const name = reach.name;
    return [
      {
        label: `${name}: flow`,
        formula: 'Q, W, H, U at the flow of the estimate',
        substituted: `Q = ${sig(state.dischargeM3s)} m³/s, W = ${sig(state.widthM)} m, H = ${sig(state.depthM)} m, U = ${sig(state.speedMps)} m/s`,
        value: state.dischargeM3s,
        unit: 'm³/s',
        source: [state.flowHow, water.flow.source].filter(Boolean).join('; '),
      },
      { label: `${name}: shear velocity`, formula: state.shearHow, substituted: reach.slope === null ? `H = ${sig(state.depthM)} m` : `√(9.81 · ${sig(state.depthM)} · ${sig(reach.slope)})`, value: state.shearMps, unit: 'm/s', source: 'Fischer et al. 1979; Manning' },
      reach.dispersionM2s === null
        ? {
            label: `${name}: dispersion along`,
            formula: 'D = 0.011 U² W² / (H u*)',
            substituted: `0.011 · ${sig(state.speedMps)}² · ${sig(state.widthM)}² / (${sig(state.depthM)} · ${sig(state.shearMps)})`,
            value: state.dispersionM2s,
            unit: 'm²/s',
            source: 'Fischer et al. 1979, eq. 5.19; a factor of 3 either way',
          }
        : { label: `${name}: dispersion along`, formula: 'D as stated', substituted: `${sig(reach.dispersionM2s)} m²/s`, value: reach.dispersionM2s, unit: 'm²/s', source: reach.coefficientNote || 'water register' },
      otherFormulas(state),
      reach.transverseM2s === null
        ? { label: `${name}: mixing across`, formula: 'e = 0.6 H u*', substituted: `0.6 · ${sig(state.depthM)} · ${sig(state.shearMps)}`, value: state.transverseM2s, unit: 'm²/s', source: 'Fischer et al. 1979, section 5.1; ± 50 %' }
        : { label: `${name}: mixing across`, formula: 'e as stated', substituted: `${sig(reach.transverseM2s)} m²/s`, value: reach.transverseM2s, unit: 'm²/s', source: reach.coefficientNote || 'water register' },
    ];
  });
}

/** What other published regressions give, to be set beside the dispersion in use. */
function otherFormulas(state: ReachState): WorkingLine {
  const advice = adviseDispersion(state);
  return {
    label: `${state.reach.name}: dispersion by other formulas`,
    formula: 'median of five regressions',
    substituted: `from ${sig(advice.least, 3)} to ${sig(advice.most, 3)} m²/s; data lie between ${sig(advice.lowM2s, 3)} and ${sig(advice.highM2s, 3)} m²/s${advice.isInRange ? '' : '; outside the range of their rivers'}. The peak goes with D^(−1/2)`,
    value: advice.medianM2s,
    unit: 'm²/s',
    source: 'Seo & Cheong 1998, Kashefipour & Falconer 2002, Sahay & Dutta 2009, Zeng & Huai 2014, Disley et al. 2015',
  };
}

/** How the likely peak at a receptor came about, for each release that reaches it. */
export function riverReceptorWorking({ input, paths }: RiverFacts, receptor: EstimateReceptor, places: readonly (PathPlace | null)[], eta: number, peakS: number): WorkingLine[] {
  return paths.flatMap((path, i) => {
    const place = places[i];
    return place ? linesFor(path, place, receptor, eta, peakS, input.releases.length > 1) : [];
  });
}

function linesFor(path: RiverPath, place: PathPlace, receptor: EstimateReceptor, eta: number, peakS: number, isNamed: boolean): WorkingLine[] {
  const { release, profile } = path.release;
  const suffix = isNamed ? ` (${release.name})` : '';
  const passed = path.segments.slice(0, path.segments.indexOf(place.segment) + 1);
  const legs = passed.map((segment) => {
    const lengthM = segment === place.segment ? place.distanceM - segment.startM : (segment.fromKm - segment.toKm) * 1_000;
    return `${sig(lengthM)} m / ${sig(segment.state.speedMps)} m/s`;
  });
  const sigmaS = Math.sqrt(path.startVarianceS2 + 2 * place.kappaS * Math.max(0, place.travelS));
  const ageS = profile.isInstant ? peakS - profile.startS : place.travelS;
  const tau = tauAt(place, ageS);
  const Q = place.segment.state.dischargeM3s;
  const lines: WorkingLine[] = [
    { label: `Distance to ${receptor.name}${suffix}`, formula: 'sum of chainages passed', substituted: lengthText(place.distanceM), value: place.distanceM, unit: 'm', source: 'chainage of the water register' },
    { label: `Travel time${suffix}`, formula: 'T = Σ L/U', substituted: `${legs.join(' + ')} = ${durationText(place.travelS)}`, value: place.travelS, unit: 's', source: 'mean velocity of each reach' },
    {
      label: `Spread of the passage${suffix}`,
      formula: 'σ = √(2 k T), k = Σ (D/U²)(L/U) / T',
      substituted: `√(2 · ${sig(place.kappaS)} s · ${sig(place.travelS)} s) = ${durationText(sigmaS)}`,
      value: sigmaS,
      unit: 's',
      source: 'variances of reaches add; Fischer et al. 1979',
    },
    {
      label: `Bank factor${suffix}`,
      formula: 'concentration at the bank over the section mean, between two banks, τ = Σ e t / W²',
      substituted: `τ = ${sig(tau)}, receptor ${eta === 0 ? 'left bank' : eta === 1 ? 'right bank' : 'mid-channel'}`,
      value: acrossAt(place.segment.across, eta, tau),
      unit: 'times',
      source: place.segment.across.kind === 'source' ? 'images and cosine series, Fischer et al. 1979' : 'cosine series after the confluence, in shares of discharge',
    },
  ];
  const density = ageS > 0 ? sectionDensity(place, path.startVarianceS2, ageS) : 0;
  lines.push(
    profile.isInstant
      ? {
          label: `Section mean per kilogram at the peak${suffix}`,
          formula: 'exp(−(T − a)²/(2·2ka)) / (Q √(2π·2ka)), a the age',
          substituted: `a = ${durationText(ageS)}, Q = ${sig(Q)} m³/s`,
          value: density,
          unit: '1/m³',
          source: 'slug in a river, Fischer et al. 1979, section 2.3',
        }
      : {
          label: `Section mean per kilogram, were it released at once${suffix}`,
          formula: '1 / (Q √(2π) σ); spread over the release it is nearer 1/(Q · duration)',
          substituted: `1 / (${sig(Q)} · ${sig(sigmaS)} · √(2π)); 1/(${sig(Q)} · ${sig(profile.stopS - profile.startS)})`,
          value: density,
          unit: '1/m³',
          source: 'upper bound; the answer is the integral over the time of release',
        },
  );
  return lines;
}
