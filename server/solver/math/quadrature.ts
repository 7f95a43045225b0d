/**
 * Adaptive Gauss-Kronrod quadrature (7 and 15 points), and fixed Gauss-Legendre nodes.
 * Source of method: Piessens, de Doncker, Ueberhuber & Kahaner 1983, Quadpack. The nodes are found here by Newton
 * steps on the Legendre polynomial; the Kronrod extension is the table of that book.
 */
import type { Meter } from '../meter';

const XK = [0.991455371120812639206854697526329, 0.949107912342758524526189684047851, 0.864864423359769072789712788640926, 0.741531185599394439863864773280788, 0.58608723546769113029414469183582, 0.405845151377397166906606412076961, 0.207784955007898467600689403773245, 0];
const WK = [0.022935322010529224963732008058970, 0.063092092629978553290700663189204, 0.104790010322250183839876322541518, 0.140653259715525918745189590510238, 0.16900472663926790282829543641, 0.190350578064785409913256402421014, 0.204432940075298892414161999234649, 0.209482141084727828012999174891714];
/** Weights of the seven Gauss points, which are every second Kronrod point. */
const WG = [0.129484966168869693270611432679082, 0.27970539148927666790146777142378, 0.381830050505118944950369775488975, 0.417959183673469387755102040816327];

/** What to do with a stretch before it is evaluated: leave it out, halve it, or evaluate it. */
export type Triage = (a: number, b: number) => 'skip' | 'split' | 'take';

export class AdaptiveQuadrature {
  private a: number[] = [];
  private b: number[] = [];
  private value: number[] = [];
  private error: number[] = [];

  constructor(private readonly meter: Meter) {}

  /**
   * Integral of f over the stretches between ascending `cuts`, to `relative` error of the whole.
   * `triage` lets the caller leave out stretches that cannot matter and halve those too wide for 15 points.
   * Deterministic: the order of the sums depends on the arguments alone.
   */
  integrate(f: (x: number) => number, cuts: readonly number[], relative: number, triage: Triage): number {
    this.a.length = this.b.length = this.value.length = this.error.length = 0;
    for (let i = 1; i < cuts.length; i++) this.addStretch(f, cuts[i - 1]!, cuts[i]!, triage, 0);
    let sum = total(this.value);
    let error = total(this.error);
    for (let round = 0; round < 200 && error > relative * Math.abs(sum); round++) {
      const worst = indexOfLargest(this.error);
      const a = this.a[worst]!;
      const b = this.b[worst]!;
      const mid = (a + b) / 2;
      if (mid <= a || mid >= b) break;
      this.measure(f, a, mid, worst);
      this.measure(f, mid, b, this.a.length);
      sum = total(this.value);
      error = total(this.error);
    }
    if (sum !== 0) this.meter.noteError(error / Math.abs(sum));
    return sum;
  }

  private addStretch(f: (x: number) => number, a: number, b: number, triage: Triage, depth: number): void {
    const verdict = depth < 40 ? triage(a, b) : 'take';
    if (verdict === 'skip') return;
    if (verdict === 'take') return this.measure(f, a, b, this.a.length);
    const mid = (a + b) / 2;
    this.addStretch(f, a, mid, triage, depth + 1);
    this.addStretch(f, mid, b, triage, depth + 1);
  }

  private measure(f: (x: number) => number, a: number, b: number, at: number): void {
    const mid = (a + b) / 2;
    const half = (b - a) / 2;
    const centre = f(mid);
    let kronrod = WK[7]! * centre;
    let gauss = WG[3]! * centre;
    let size = WK[7]! * Math.abs(centre);
    for (let i = 0; i < 7; i++) {
      const left = f(mid - half * XK[i]!);
      const right = f(mid + half * XK[i]!);
      kronrod += WK[i]! * (left + right);
      size += WK[i]! * (Math.abs(left) + Math.abs(right));
      if (i % 2 === 1) gauss += WG[(i - 1) / 2]! * (left + right);
    }
    this.meter.count(15);
    const gap = Math.abs(kronrod - gauss);
    this.a[at] = a;
    this.b[at] = b;
    this.value[at] = kronrod * half;
    // The rule of Quadpack: the Kronrod value is far better than its distance from the Gauss value.
    this.error[at] = size === 0 ? 0 : size * half * Math.min(1, (200 * gap) / size) ** 1.5;
  }
}

const total = (values: readonly number[]): number => {
  let sum = 0;
  for (const value of values) sum += value;
  return sum;
};

function indexOfLargest(values: readonly number[]): number {
  let best = 0;
  for (let i = 1; i < values.length; i++) if (values[i]! > values[best]!) best = i;
  return best;
}

export type Nodes = { readonly x: readonly number[]; readonly w: readonly number[] };
const legendreCache = new Map<number, Nodes>();

/** Gauss-Legendre nodes and weights on [-1, 1], ascending; exact for polynomials of degree 2n - 1. */
export function gaussLegendre(n: number): Nodes {
  const known = legendreCache.get(n);
  if (known) return known;
  const x: number[] = [];
  const w: number[] = [];
  for (let i = n; i >= 1; i--) {
    let z = Math.cos((Math.PI * (i - 0.25)) / (n + 0.5));
    let slope = 1;
    for (let step = 0; step < 100; step++) {
      let p = 1;
      let before = 0;
      for (let k = 1; k <= n; k++) [p, before] = [((2 * k - 1) * z * p - (k - 1) * before) / k, p];
      slope = (n * (z * p - before)) / (z * z - 1);
      const move = p / slope;
      z -= move;
      if (Math.abs(move) < 1e-15) break;
    }
    x.push(z);
    w.push(2 / ((1 - z * z) * slope * slope));
  }
  const nodes = { x, w };
  legendreCache.set(n, nodes);
  return nodes;
}
