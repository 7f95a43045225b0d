import { gaussLegendre } from '../math/quadrature';
import { instantiate, Layout, type CompiledKernel } from './host';

type ReleaseCalls = { atPoints(out: number, x: number, y: number, count: number, parameters: number, nodes: number, weights: number, half: number): void };

/** A source of constant rate in a uniform current along x, seen at one time. */
export type SteadyRelease = {
  currentMps: number;
  /** Dispersion along and across the current, m2/s. */
  alongM2s: number;
  acrossM2s: number;
  /** Standard deviation at the start, m; above 0. */
  startSigmaM: number;
  /** Ages of what was released last and first, s. A source that still works has a youngest age of 0. */
  youngestS: number;
  oldestS: number;
  decayPerS: number;
  rateKgS: number;
  depthM: number;
};

const PARAMETERS = 10;
const NODES = 16;
/** Panel length in passing widths: the evened nodes on 12 of them leave 3e-7 of the peak. */
const PANEL_WIDTHS = 12;
/** Panel length in times of the cloud's growth from its size at the panel's start. */
const PANEL_GROWTH = 3;
const POINTS_AT_ONCE = 1024;

const areValid = (r: SteadyRelease): boolean =>
  r.currentMps >= 0 && r.alongM2s >= 0 && r.acrossM2s >= 0 && r.startSigmaM > 0 && r.youngestS >= 0 && r.oldestS >= r.youngestS && r.oldestS < Infinity && r.decayPerS >= 0 && r.depthM > 0 && Number.isFinite(r.rateKgS) && (r.currentMps > 0 || r.alongM2s > 0);

/**
 * Depth-averaged concentration below a steady source: the integral over release time of normal clouds that move with a
 * uniform current and grow by constant dispersion, sigma^2 = sigma0^2 + 2 K a (Fischer et al. 1979, section 2.4).
 * Integrated over the age in units of the cloud's size, over the stretch in which clouds pass each point; see
 * wasm/release.as. Error: 3e-7 of the peak. Cost: about 0.1 us a point near the source, less where clouds pass quickly.
 */
export class ReleasePoints {
  private readonly calls: ReleaseCalls;
  private readonly at: { out: number; x: number; y: number; parameters: number; nodes: number; weights: number };
  private readonly fields: { out: Float64Array; x: Float64Array; y: Float64Array; parameters: Float64Array };

  constructor(kernel: CompiledKernel) {
    const layout = new Layout();
    this.at = { out: layout.f64(POINTS_AT_ONCE), x: layout.f64(POINTS_AT_ONCE), y: layout.f64(POINTS_AT_ONCE), parameters: layout.f64(PARAMETERS), nodes: layout.f64(NODES), weights: layout.f64(NODES) };
    const { calls, buffer } = instantiate<ReleaseCalls>(kernel, layout);
    this.calls = calls;
    const view = (address: number, length: number): Float64Array => new Float64Array(buffer, address, length);
    this.fields = { out: view(this.at.out, POINTS_AT_ONCE), x: view(this.at.x, POINTS_AT_ONCE), y: view(this.at.y, POINTS_AT_ONCE), parameters: view(this.at.parameters, PARAMETERS) };
    const rule = evenedLegendre(NODES, EVENED.panel);
    view(this.at.nodes, NODES).set(rule.x);
    view(this.at.weights, NODES).set(rule.w);
  }

  /**
   * @param out  kg/m3 at each point; overwritten
   * @param x    m from the source along the current; y across it, same length
   */
  evaluate(out: Float64Array, x: Float64Array, y: Float64Array, release: SteadyRelease): void {
    if (x.length !== out.length || y.length !== out.length) throw new RangeError(`Points have ${x.length} and ${y.length} coordinates, results ${out.length}`);
    if (!areValid(release)) throw new RangeError(`A steady release needs a current or dispersion, a size, a depth and ages in order, got ${JSON.stringify(release)}`);
    const { currentMps, alongM2s, acrossM2s, startSigmaM, youngestS, oldestS, decayPerS, rateKgS, depthM } = release;
    const { at, fields } = this;
    fields.parameters.set([currentMps, alongM2s, acrossM2s, startSigmaM, youngestS, oldestS, decayPerS, rateKgS / (2 * Math.PI * depthM), PANEL_WIDTHS, PANEL_GROWTH]);
    for (let from = 0; from < out.length; from += POINTS_AT_ONCE) {
      const count = Math.min(POINTS_AT_ONCE, out.length - from);
      fields.x.set(x.subarray(from, from + count));
      fields.y.set(y.subarray(from, from + count));
      this.calls.atPoints(at.out, at.x, at.y, count, at.parameters, at.nodes, at.weights, NODES / 2);
      out.set(fields.out.subarray(0, count), from);
    }
  }
}

/** How far nodes are evened, 0 to 1: the many of a whole release bear more than the few of a panel. Found by trial for 1e-6. */
const EVENED = { panel: 0.8, release: 0.95 };

/**
 * Gauss-Legendre nodes on [-1, 1] drawn together in the middle and apart at the ends by u = asin(alpha t) / asin(alpha):
 * for a normal curve that the interval holds whole, or cut anywhere, about a third fewer serve as well.
 * Source: Kosloff & Tal-Ezer 1993, J. Comput. Phys. 104:457 (the map); Hale & Trefethen 2008, SIAM J. Numer. Anal.
 * 46:930 (its use for quadrature).
 */
function evenedLegendre(count: number, alpha: number): { x: Float64Array; w: Float64Array } {
  const { x, w } = gaussLegendre(count);
  const span = Math.asin(alpha);
  return {
    x: Float64Array.from(x, (t) => Math.asin(alpha * t) / span),
    w: Float64Array.from(x, (t, n) => (w[n]! * alpha) / (span * Math.sqrt(1 - (alpha * t) ** 2))),
  };
}

/**
 * Ages and weights (s) whose clouds, added up, stand for a steady release on a whole grid: sum of weight f(age) for the
 * integral of f over the ages, by evened Gauss-Legendre nodes in the age in units of the cloud's size, w = integral of
 * da / sigma. Error: 1e-6 of the peak from count = 1.1 U w on, U w being the length of the release in cloud sizes.
 */
export function gradedAges(release: Pick<SteadyRelease, 'alongM2s' | 'startSigmaM' | 'youngestS' | 'oldestS'>, count: number): { agesS: Float64Array; weightsS: Float64Array } {
  const { alongM2s: k, startSigmaM: s0 } = release;
  const graded = (ageS: number): number => (2 * ageS) / (s0 + Math.sqrt(s0 * s0 + 2 * k * ageS));
  const [from, to] = [graded(release.youngestS), graded(release.oldestS)];
  const { x, w } = evenedLegendre(count, EVENED.release);
  const sizes = x.map((u) => from + ((to - from) / 2) * (1 + u));
  return { agesS: sizes.map((size) => size * (s0 + (k * size) / 2)), weightsS: sizes.map((size, n) => ((to - from) / 2) * w[n]! * (s0 + k * size)) };
}
