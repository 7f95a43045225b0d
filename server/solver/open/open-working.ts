import type { EstimateReceptor } from '../../../shared/schemas/estimate';
import type { WorkingLine } from '../../../shared/schemas/estimate-result';
import { durationText, lengthText, sig } from '../format';
import { findMaximum } from '../math/roots';
import type { OpenFacts } from './open-solver';
import { Puff, type OpenSource } from './puffs';
import { spreadLine } from './spread-working';

/** Working common to all receptors: depth, current, spread, shore. */
export function openRunWorking({ water, input, motion, shore }: OpenFacts): WorkingLine[] {
  const moved = new Float64Array(2);
  motion.current.displacement(input.doc.horizonS, moved);
  const lines: WorkingLine[] = [
    { label: 'Depth mixed over', formula: 'h as stated', substituted: `h = ${sig(water.mixingDepthM)} m of ${sig(water.depthM)} m`, value: water.mixingDepthM, unit: 'm', source: water.coefficientNote || 'water register' },
    {
      label: 'Net drift over the estimate',
      formula: 'X = ∫ u dt over residual, tide, wind and series',
      substituted: `east ${sig(moved[0]!)} m, north ${sig(moved[1]!)} m in ${durationText(input.doc.horizonS)}`,
      value: Math.hypot(moved[0]!, moved[1]!),
      unit: 'm',
      source: water.current.map((part) => part.kind).join(' + ') || 'no current given',
    },
    spreadLine(water, { agedFormula: 'σ² per axis = f · ½ · 0.0108 t^2.34 cm²', agedNote: '', constantFormula: 'Σ = Σ₀ + 2 ∫ R diag(K_L, K_T) Rᵀ dt', turning: 'axes turning with the current' }),
  ];
  if (shore)
    lines.push({
      label: shore.oppositeM === null ? 'Straight shore' : 'Two straight shores',
      formula: shore.oppositeM === null ? 'C = C(source) + C(mirror source)' : 'images below σ²/(2W²) = 0.16, cosine series above',
      substituted: `no flow through ${shore.oppositeM === null ? 'the line' : `either line, ${sig(shore.oppositeM)} m apart`}; current along it only`,
      value: shore.oppositeM,
      unit: shore.oppositeM === null ? '' : 'm',
      source: 'method of images, Fischer et al. 1979',
    });
  if (motion.shear) {
    const { ux, uy, vx } = motion.shear.gradient;
    lines.push({ label: 'Velocity gradient', formula: 'dμ/dt = u₀ + G μ, dΣ/dt = G Σ + Σ Gᵀ + 2 K', substituted: `G = [${sig(ux)} ${sig(uy)}; ${sig(vx)} ${sig(-ux)}] 1/s`, value: null, unit: '1/s', source: 'Okubo & Carter 1966' });
  }
  if (water.vertical)
    lines.push({ label: 'Mixing over depth', formula: 'r(z/h; z₀/h, τ), τ = K_z t / h²', substituted: `K_z = ${sig(water.vertical.kzM2s)} m²/s, h = ${sig(water.mixingDepthM)} m; even to 4 % after 0.4 h²/K_z = ${durationText((0.4 * water.mixingDepthM ** 2) / water.vertical.kzM2s)}; receptors without a depth read the mean`, value: water.vertical.kzM2s, unit: 'm²/s', source: 'images and cosine series, Fischer et al. 1979' });
  return lines;
}

/** How the likely peak at a receptor came about: the puff that counts most, its place and size, and the sum. */
export function openReceptorWorking(facts: OpenFacts, receptor: EstimateReceptor, at: { x: number; y: number }, distanceM: number, peakS: number): WorkingLine[] {
  const lines: WorkingLine[] = [
    { label: `Distance to ${receptor.name}`, formula: 'straight line from the nearest release', substituted: lengthText(distanceM), value: distanceM, unit: 'm', source: 'positions' },
  ];
  for (const source of facts.sources) lines.push(...puffLines(facts, source, at, peakS));
  return lines;
}

function puffLines({ motion, input }: OpenFacts, source: OpenSource, at: { x: number; y: number }, peakS: number): WorkingLine[] {
  const { profile, release } = source.release;
  if (peakS <= profile.startS) return [];
  const puff = new Puff(motion, source);
  const last = Math.min(profile.stopS, peakS);
  const strength = (releasedS: number): number => {
    puff.seen(releasedS, peakS, input.doc.substance.applyLoss);
    return puff.at(at.x, at.y);
  };
  let releasedS = profile.startS;
  if (!profile.isInstant) {
    const span = last - profile.startS;
    const samples = Array.from({ length: 101 }, (_, i) => profile.startS + (span * (i + 0.5)) / 101);
    const best = samples.reduce((most, t) => (strength(t) > strength(most) ? t : most), samples[0]!);
    releasedS = findMaximum(strength, Math.max(profile.startS, best - span / 101), Math.min(last, best + span / 101), 1).x;
  }
  const value = strength(releasedS);
  const [sxx, sxy, syy] = puff.covariance;
  const mean = (sxx! + syy!) / 2;
  const spread = Math.hypot((sxx! - syy!) / 2, sxy!);
  const off = Math.sqrt(puff.distance2(at.x, at.y, 0));
  const name = input.releases.length > 1 ? ` (${release.name})` : '';
  return [
    {
      label: `Cloud at the peak${name}`,
      formula: 'centre = release + ∫ u dt; σ from Σ = Σ₀ + gained',
      substituted: `released at ${durationText(releasedS)}, age ${durationText(peakS - releasedS)}, moved east ${sig(puff.shiftX)} m, north ${sig(puff.shiftY)} m; σ ${sig(Math.sqrt(mean + spread))} m by ${sig(Math.sqrt(mean - spread))} m; place is ${sig(off, 3)} σ off its centre`,
      value: Math.sqrt(mean + spread),
      unit: 'm',
      source: 'normal cloud, Fischer et al. 1979, section 2.4',
    },
    profile.isInstant
      ? {
          label: `Concentration per kilogram${name}`,
          formula: 'exp(−d²/2) / (2π h √det Σ), d in standard deviations',
          substituted: `exp(−${sig(off)}²/2) / (2π · ${sig(motion.mixingDepthM)} · ${sig(Math.sqrt(sxx! * syy! - sxy! * sxy!))})`,
          value,
          unit: '1/m³',
          source: 'instantaneous release',
        }
      : {
          label: `Concentration per kilogram${name}`,
          formula: 'C = ∫ rate(s) · exp(−d(s)²/2) / (2π h √det Σ(s)) ds over the time of release',
          substituted: `strongest share ${sig(value)} 1/m³ released at ${durationText(releasedS)}; integral to a relative error of ${sig(input.tolerance, 2)}`,
          value: null,
          unit: '1/m³',
          source: 'superposition, adaptive Gauss-Kronrod quadrature',
        },
  ];
}
