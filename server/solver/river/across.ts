import { betweenWalls, THETA_SWITCH } from '../physics/two-walls';

/**
 * How a release stands across the channel, relative to its section mean. The coordinate runs from the left bank (0) to
 * the right bank (1) in shares of the discharge, so that tributaries only squeeze it; spreading is counted in
 * tau = integral of e/W^2 dt. Source: Yotsukura & Sayre 1976, Water Resour. Res. 12: 695 (cumulative discharge).
 */
export type Across =
  /** From a point: exact between two banks. */
  | { readonly kind: 'source'; readonly eta0: number; readonly startTau: number }
  /** Below a confluence: a cosine series; `modes[m]` belongs to cos(m pi eta), `modes[0]` is 1. */
  | { readonly kind: 'modes'; readonly modes: Float64Array };

const MODES = 256;
/** The front between two waters that have just met is given this much spread (1 % of the width), which 256 cosines resolve to 1e-14. */
const LEAST_TAU = 5e-5;

/** Relative concentration at eta after spreading tau; mean 1 over the channel. */
export function acrossAt(across: Across, eta: number, tau: number): number {
  if (across.kind === 'source') return betweenWalls(eta, across.eta0, across.startTau + tau);
  const spread = Math.max(LEAST_TAU, tau);
  const last = modesNeeded(spread);
  let sum = 1;
  for (let m = 1; m <= last; m++) sum += across.modes[m]! * Math.exp(-m * m * Math.PI * Math.PI * spread) * Math.cos(m * Math.PI * eta);
  return Math.max(0, sum);
}

/** exp(-m^2 pi^2 tau) < 1e-15 beyond. */
const modesNeeded = (tau: number): number => Math.min(MODES - 1, Math.ceil(Math.sqrt(34.5 / (Math.PI * Math.PI * tau))));

/** True where the section is even to the given share. */
export const isEven = (across: Across, tau: number, share: number): boolean =>
  across.kind === 'source' ? 2 * Math.exp(-Math.PI * Math.PI * (across.startTau + tau)) < share : false;

/** Values at evenly spaced nodes from bank to bank, into `out[at...]`, times `scale`, added. */
export class AcrossNodes {
  private readonly cosines: Float64Array;
  private readonly decayed = new Float64Array(MODES);

  constructor(readonly count: number) {
    this.cosines = new Float64Array(MODES * count);
    for (let m = 0; m < MODES; m++) for (let j = 0; j < count; j++) this.cosines[m * count + j] = Math.cos((m * Math.PI * j) / (count - 1));
  }

  add(out: Float64Array, at: number, across: Across, tau: number, scale: number): void {
    const spread = across.kind === 'source' ? across.startTau + tau : Math.max(LEAST_TAU, tau);
    if (across.kind === 'source' && spread < THETA_SWITCH) {
      for (let j = 0; j < this.count; j++) out[at + j]! += scale * betweenWalls(j / (this.count - 1), across.eta0, spread);
      return;
    }
    const last = modesNeeded(spread);
    for (let m = 1; m <= last; m++)
      this.decayed[m] = Math.exp(-m * m * Math.PI * Math.PI * spread) * (across.kind === 'modes' ? across.modes[m]! : 2 * Math.cos(m * Math.PI * across.eta0));
    for (let j = 0; j < this.count; j++) {
      let sum = 1;
      for (let m = 1; m <= last; m++) sum += this.decayed[m]! * this.cosines[m * this.count + j]!;
      out[at + j]! += scale * Math.max(0, sum);
    }
  }
}

/**
 * The same water after a confluence: it takes the stretch [low, low + share] of the joined river, the rest is clean.
 * New cosine amplitudes by the exact integrals c_m = 2 integral_0^1 r(x) cos(m pi (low + share x)) dx.
 */
export function afterConfluence(across: Across, tau: number, low: number, share: number): Across {
  const before = amplitudes(across, tau);
  const modes = new Float64Array(MODES);
  modes[0] = 1;
  for (let m = 1; m < MODES; m++) {
    const start = m * Math.PI * low;
    const slope = m * Math.PI * share;
    let sum = 0;
    for (let n = 0; n < before.length; n++) sum += before[n]! * 0.5 * (cosineMean(start, slope + n * Math.PI) + cosineMean(start, slope - n * Math.PI));
    modes[m] = 2 * sum;
  }
  return { kind: 'modes', modes };
}

/** Integral over [0, 1] of cos(a + k x). */
const cosineMean = (a: number, k: number): number => (Math.abs(k) < 1e-9 ? Math.cos(a) : (Math.sin(a + k) - Math.sin(a)) / k);

function amplitudes(across: Across, tau: number): Float64Array {
  const spread = Math.max(LEAST_TAU, tau + (across.kind === 'source' ? across.startTau : 0));
  const out = new Float64Array(modesNeeded(spread) + 1);
  out[0] = 1;
  for (let m = 1; m < out.length; m++)
    out[m] = Math.exp(-m * m * Math.PI * Math.PI * spread) * (across.kind === 'modes' ? across.modes[m]! : 2 * Math.cos(m * Math.PI * across.eta0));
  return out;
}
