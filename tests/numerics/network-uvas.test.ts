import { describe, expect, it } from 'vitest';
import { expectClose } from './close-to';
import { reachOf, receptor, release, riverDocument } from './documents';
import { channel, networkField, peakOf, responseOf } from './network-helpers';

/**
 * Uvas Creek, California, September 1972: chloride let in evenly for three hours, five sub-reaches with dead zones and
 * clean inflow from the ground. Figures of each sub-reach: Bencala & Walters 1983, Water Resour. Res. 19: 718.
 */
const subReaches = [
  { from: 0, to: 38, D: 0.12, A: 0.3, storage: null, inflow: 0 },
  { from: 38, to: 105, D: 0.15, A: 0.42, storage: null, inflow: 0 },
  { from: 105, to: 281, D: 0.24, A: 0.36, storage: { areaRatio: 1, exchangePerS: 3e-5 }, inflow: 4.545e-6 },
  { from: 281, to: 433, D: 0.31, A: 0.41, storage: { areaRatio: 1, exchangePerS: 1e-5 }, inflow: 1.974e-6 },
  { from: 433, to: 669, D: 0.4, A: 0.52, storage: { areaRatio: 3, exchangePerS: 4.5e-5 }, inflow: 2.151e-6 },
] as const;
const HEAD_M3S = 0.0125;
const END_M = 669;
const INJECTION_S = 3 * 3_600;
/** Plateau above background at the head, mg/l (from memory). */
const PLATEAU_MG_L = 7.7;
/** Inflow comes in where one piece ends and the next begins. */
const PIECES = 4;

type Piece = { id: string; fromM: number; toM: number; Q: number; D: number; A: number; storage: { areaRatio: number; exchangePerS: number } | null };
const pieces: Piece[] = [];
let discharge: number = HEAD_M3S;
for (const { from, to, D, A, storage, inflow } of subReaches) {
  const count = inflow > 0 ? PIECES : 1;
  const lengthM = (to - from) / count;
  for (let i = 0; i < count; i++) {
    pieces.push({ id: `u${from}-${i}`, fromM: from + i * lengthM, toM: from + (i + 1) * lengthM, Q: discharge + (inflow * lengthM) / 2, D, A, storage });
    discharge += inflow * lengthM;
  }
}

type Complex = [number, number];
const times = ([a, b]: Complex, [c, d]: Complex): Complex => [a * c - b * d, a * d + b * c];
const over = (p: Complex, [c, d]: Complex): Complex => times(p, [c / (c * c + d * d), -d / (c * c + d * d)]);
const root = ([a, b]: Complex): Complex => {
  const size = Math.hypot(a, b);
  const re = Math.sqrt((size + a) / 2);
  return [re, b === 0 ? 0 : b / (2 * re)];
};
const exp = ([a, b]: Complex): Complex => [Math.exp(a) * Math.cos(b), Math.exp(a) * Math.sin(b)];

/** Both modes exp(lambda x) of a piece at frequency w, each with its flux per concentration, Q - A D lambda. */
function modesOf({ Q, D, A, storage }: Piece, w: number): { lambda: Complex; flux: Complex }[] {
  const U = Q / A;
  let psi: Complex = [0, w];
  if (storage) {
    const back = storage.exchangePerS / storage.areaRatio;
    const returned = over([back, 0], [back, w]);
    psi = [storage.exchangePerS * (1 - returned[0]), w - storage.exchangePerS * returned[1]];
  }
  const r = root([1 + (4 * D * psi[0]) / U ** 2, (4 * D * psi[1]) / U ** 2]);
  return [-1, 1].map((sign) => {
    const lambda: Complex = [(U / (2 * D)) * (1 + sign * r[0]), (U / (2 * D)) * sign * r[1]];
    return { lambda, flux: [Q - A * D * lambda[0], -A * D * lambda[1]] as Complex };
  });
}

/** Concentration at x for a unit flux let in at the head: concentration and flux go on from piece to piece, the last has no end. */
function response(x: number, w: number): Complex {
  let C: Complex = [1, 0];
  let F: Complex = modesOf(pieces[pieces.length - 1]!, w)[0]!.flux;
  let atX: Complex = C;
  for (const piece of [...pieces].reverse()) {
    const [down, up] = modesOf(piece, w) as [{ lambda: Complex; flux: Complex }, { lambda: Complex; flux: Complex }];
    if (Math.abs(piece.toM - x) < 1e-6) atX = C;
    const rest = times(down.flux, C);
    const b = over([F[0] - rest[0], F[1] - rest[1]], [up.flux[0] - down.flux[0], up.flux[1] - down.flux[1]]);
    const a: Complex = [C[0] - b[0], C[1] - b[1]];
    const lengthM = piece.toM - piece.fromM;
    const [ea, eb] = [down, up].map(({ lambda }, i) => times(i === 0 ? a : b, exp([-lambda[0] * lengthM, -lambda[1] * lengthM]))) as [Complex, Complex];
    C = [ea[0] + eb[0], ea[1] + eb[1]];
    const [fa, fb] = [times(ea, down.flux), times(eb, up.flux)];
    F = [fa[0] + fb[0], fa[1] + fb[1]];
  }
  return over(atX, F);
}

/** Concentration at x over the undiluted plateau at the head, by Fourier inversion of the joined pieces: an independent route. */
function joined(x: number): (tS: number) => number {
  // Long enough that the tail of the dead zones (slowest 1/e time 28 h) does not fold back.
  const step = (2 * Math.PI) / 2e6;
  const rows: [number, Complex][] = [];
  for (let k = 1; k < 8_000; k++) {
    const w = k * step;
    const pulse = over([1 - Math.cos(w * INJECTION_S), Math.sin(w * INJECTION_S)], [0, w * INJECTION_S]);
    const G = times(response(x, w), pulse);
    if (Math.hypot(...G) * HEAD_M3S < 1e-7) break;
    rows.push([w, G]);
  }
  const [still] = response(x, 1e-12);
  return (tS) => (((still / 2 + rows.reduce((sum, [w, G]) => sum + G[0] * Math.cos(w * tS) - G[1] * Math.sin(w * tS), 0)) * step) / Math.PI) * INJECTION_S * HEAD_M3S;
}

describe('Uvas Creek', () => {
  const reaches = pieces.map(({ id, fromM, toM, Q, D, A, storage }, i) =>
    reachOf(
      { id, lengthKm: 1, Q, W: 2, H: A / 2, U: Q / A, D, e: 0.02 },
      { centreline: [[0, 0, (END_M - fromM) / 1_000], [0.001, 0, (END_M - toM) / 1_000]], downstreamReachId: pieces[i + 1]?.id ?? null, ...(storage ? { storage } : {}) },
    ),
  );
  const sites = [105, 281, 433, 669];
  const doc = riverDocument(reaches, {
    horizonS: 50_000,
    releases: [release({ channel: channel('u0-0', END_M / 1_000), timing: { kind: 'steady', durationS: INJECTION_S } })],
    receptors: sites.map((x) => {
      const piece = pieces.find(({ toM }) => Math.abs(toM - x) < 1e-6)!;
      return receptor({ id: `s${x}`, channel: channel(piece.id, reaches.find(({ id }) => id === piece.id)!.centreline[1]![2]) });
    }),
  });
  const field = networkField(doc, { isPreview: true });
  /** Over the plateau at the head: 1/(Q0 T) per kilogram. */
  const ratio = (i: number): ((tS: number) => number) => {
    const f = responseOf(doc, field, i);
    return (tS) => f(tS) * HEAD_M3S * INJECTION_S;
  };
  const halfRise = (f: (tS: number) => number, top: number, from: number): number => Array.from({ length: 5_000 }, (_, k) => from + 10 * k).find((t) => f(t) > top / 2)!;

  // The nearest site is told coarsely by the step a preview takes for a kilometre: 6 % in time.
  it.each(sites.map((x, i) => [x, i, i === 0 ? 0.06 : 0.01] as const))('at %d m: plateau and time of half rise as by Fourier inversion of the joined reaches', (x, i, inTime) => {
    const [got, wanted] = [ratio(i), joined(x)];
    const [a, b] = [peakOf(got, 0, 50_000), peakOf(wanted, 0, 50_000, 400)];
    // Inflow comes in at the ends of four pieces a sub-reach, where the parcels are thinned at once: 1 % with a preview's step.
    expectClose(a.peak, b.peak, 0.01);
    const early = 0.1 * b.atS;
    expectClose(halfRise(got, a.peak, early), halfRise(wanted, b.peak, early), inTime);
  });

  it('is thinned by the inflow on its way: 7.7 mg/l at the head, less than full dilution below, as dead zones are still filling', () => {
    const diluted = (x: number): number => HEAD_M3S / pieces.filter(({ fromM }) => fromM < x - 1e-6).at(-1)!.Q;
    const tops = sites.map((_, i) => peakOf(ratio(i), 0, 50_000).peak);
    expectClose(PLATEAU_MG_L * tops[0]!, PLATEAU_MG_L, 0.02);
    tops.forEach((top, i) => expect(top).toBeLessThan(diluted(sites[i]!) * 1.001));
    tops.slice(1).forEach((top, i) => expect(top).toBeLessThan(tops[i]!));
    // Three hours fill the stream but not its dead zones at 281 m: between 80 and 100 % of full dilution.
    expect(tops[1]! / diluted(281)).toBeGreaterThan(0.8);
  });

  it('half rises at 281 m within a tenth of the travel time by mean velocity', () => {
    const travelS = pieces.filter(({ toM }) => toM <= 281 + 1e-6).reduce((sum, { fromM, toM, Q, A }) => sum + ((toM - fromM) * A) / Q, 0);
    const f = ratio(1);
    expectClose(halfRise(f, peakOf(f, 0, 50_000).peak, 600), travelS, 0.1);
  });
});
