import { describe, expect, it } from 'vitest';
import type { RiverWater } from '../../shared/schemas/estimate';
import { lossClock } from '../../server/solver/loss';
import { AdaptiveQuadrature } from '../../server/solver/math/quadrature';
import { Meter } from '../../server/solver/meter';
import { betweenWalls } from '../../server/solver/physics/two-walls';
import { steadyReleaseResponse } from '../../server/solver/physics/line';
import { resolveReleases } from '../../server/solver/release-profile';
import { acrossAt, afterConfluence } from '../../server/solver/river/across';
import { etaOf, placeOn, riverPath, shareAt } from '../../server/solver/river/path';
import { powerLaw, reachStates } from '../../server/solver/river/reach-state';
import { riverResponse } from '../../server/solver/river/river-response';
import type { EstimateDocument } from '../../shared/schemas/estimate';
import { expectClose } from './close-to';
import { at, reachOf, release, riverDocument } from './documents';

/** Concentration per kilogram at a chainage against time, as the engine forms it. */
function responseAt(doc: EstimateDocument, reachId: string, km: number, bank: 'left' | 'right' | 'mid', tolerance = 1e-10): (tS: number, withLoss?: boolean) => number {
  const path = riverPath(resolveReleases(doc)[0]!, reachStates(doc.water as RiverWater));
  const response = riverResponse(path, placeOn(path, reachId, km)!, etaOf(bank), lossClock(doc.substance.loss, doc.startAt), tolerance, new Meter());
  return (tS, withLoss = false) => response.at(tS, withLoss);
}

const channel = (reachId: string, chainageKm: number, bank: 'left' | 'right' | 'mid') => ({ reachId, chainageKm, bank });

describe('one even reach', () => {
  it('is exactly the slug solution: M 1000 kg, A 50 m2, U 0.5 m/s, D 20 m2/s', () => {
    const doc = riverDocument([reachOf({ id: 'r', lengthKm: 30, Q: 25, W: 10, H: 5, U: 0.5, D: 20, e: 50 })], { releases: [release({ channel: channel('r', 25, 'mid') })] });
    expectClose(1_000 * responseAt(doc, 'r', 20, 'mid')(9_000), 0.00939706251368);
  });

  it('with a first radius of 300 m and loss', () => {
    const doc = riverDocument([reachOf({ id: 'r', lengthKm: 30, Q: 25, W: 10, H: 5, U: 0.5, D: 20, e: 50 })], {
      substance: { name: 'Tracer', loss: { kind: 'first-order', ratePerS: 1e-5 } },
      releases: [release({ channel: channel('r', 25, 'mid'), initialRadiusM: 300 })],
    });
    // Variance 300^2/4 = 150^2 on each axis.
    expectClose(1_000 * responseAt(doc, 'r', 20, 'mid')(9_000, true), 0.00850377062085);
  });

  it('from a bank is exactly the product of slug and walls', () => {
    const doc = riverDocument([reachOf({ id: 'r', lengthKm: 5, Q: 90, W: 60, H: 3, U: 0.5, D: 8, e: 0.06 })], { releases: [release({ channel: channel('r', 4, 'left') })] });
    expectClose(200 * responseAt(doc, 'r', 3.55, 'left')(900), 0.0170163239328);
    expectClose(200 * responseAt(doc, 'r', 2.2, 'right')(3_600), 1.31909297524e-4);
  });

  it.each([[3_000, 7.95237683566e-5], [6_000, 0.0217125313244], [9_000, 0.00984904568628]])('an even release of an hour by its closed form, t %d s', (t, wanted) => {
    const doc = riverDocument([reachOf({ id: 'r', lengthKm: 10, Q: 16, W: 10, H: 4, U: 0.4, D: 15, e: 50 })], {
      substance: { name: 'Tracer', loss: { kind: 'first-order', ratePerS: 3e-5 } },
      releases: [release({ channel: channel('r', 9, 'mid'), timing: { kind: 'steady', durationS: 3_600 } })],
    });
    expectClose(1_800 * responseAt(doc, 'r', 7, 'mid')(t, true), wanted);
  });

  it('the same release as a table of rates goes through the quadrature and agrees', () => {
    const timing = { kind: 'table', rows: [{ atS: 0, rate: 2 }, { atS: 3_600, rate: 2 }] } as const;
    const doc = riverDocument([reachOf({ id: 'r', lengthKm: 10, Q: 16, W: 10, H: 4, U: 0.4, D: 15, e: 50 })], { releases: [release({ channel: channel('r', 9, 'mid'), timing: { ...timing, rows: [...timing.rows] } })] });
    const J = (s: number): number => steadyReleaseResponse(2_000, s, 0.4, 15, 0);
    for (const t of [4_000, 6_000, 9_000]) expectClose(responseAt(doc, 'r', 7, 'mid')(t), (J(t) - J(t - 3_600)) / (3_600 * 40), 1e-8);
  });

  it('mirrors: left bank to left bank equals right to right', () => {
    const make = (bank: 'left' | 'right') => riverDocument([reachOf({ id: 'r', lengthKm: 5, Q: 20, W: 30, H: 1.5, U: 0.45, D: 8, e: 0.05 })], { releases: [release({ channel: channel('r', 4, bank) })] });
    for (const t of [500, 1_500, 4_000]) {
      expectClose(responseAt(make('left'), 'r', 3.2, 'left')(t), responseAt(make('right'), 'r', 3.2, 'right')(t), 1e-13);
      expectClose(responseAt(make('left'), 'r', 3.2, 'right')(t), responseAt(make('right'), 'r', 3.2, 'left')(t), 1e-13);
    }
  });
});

describe('several reaches', () => {
  const three = () =>
    riverDocument(
      [
        reachOf({ id: 'a', lengthKm: 3, Q: 10, W: 20, H: 1.25, U: 0.4, D: 10, e: 50 }, { downstreamReachId: 'b' }),
        reachOf({ id: 'b', lengthKm: 5, Q: 10, W: 20, H: 0.83, U: 0.6, D: 25, e: 50 }, { downstreamReachId: 'c' }),
        reachOf({ id: 'c', lengthKm: 9, Q: 10, W: 20, H: 1, U: 0.5, D: 15, e: 50 }),
      ],
      { releases: [release({ channel: channel('a', 3, 'mid') })] },
    );
  const dose = (f: (t: number) => number, end: number): number => new AdaptiveQuadrature(new Meter()).integrate(f, [1, end], 1e-10, (a, b) => (b - a > 400 ? 'split' : 'take'));

  it('pass on the whole mass: the dose is M/Q wherever it is taken', () => {
    const doc = three();
    for (const [reach, km] of [['a', 1], ['b', 4], ['b', 0.5], ['c', 8], ['c', 1]] as const) expectClose(dose(responseAt(doc, reach, km, 'mid'), 120_000), 1 / 10, 1e-8);
  });

  it('keep the summed mean and variance, beside what a resident concentration adds', () => {
    const f = responseAt(three(), 'c', 1, 'mid');
    const total = dose(f, 120_000);
    const mean = dose((t) => t * f(t), 120_000) / total;
    const variance = dose((t) => (t - mean) ** 2 * f(t), 120_000) / total;
    // Flux moments: mean sum L/U, variance sum 2 D L / U^3. Resident adds 2k to the mean and 8k^2 to the variance, k = variance/(2 mean).
    const k = 4_014_907.40741 / (2 * 31_833.3333333);
    expectClose(mean, 31_833.3333333 + 2 * k, 1e-7);
    expectClose(variance, 4_014_907.40741 + 8 * k * k, 1e-6);
  });

  it('stand within 3 % of the exact chain near its peak', () => {
    const f = responseAt(three(), 'c', 1, 'mid');
    // Flux density by Fourier inversion; the resident form peaks k = 63 s later, 3 % of the passage's spread of 2,004 s.
    expectClose(10 * f(31_000), 1.89607182393e-4, 0.03);
    expectClose(10 * f(32_000), 1.96868289323e-4, 0.03);
  });

  it('do not jump where one reach ends and the next begins with the same discharge', () => {
    const doc = three();
    for (const t of [6_000, 8_000]) expectClose(responseAt(doc, 'a', 0, 'mid')(t), responseAt(doc, 'b', 5, 'mid')(t), 1e-12);
  });
});

describe('a confluence', () => {
  const joined = (joinsOnBank: 'left' | 'right') =>
    riverDocument(
      [
        reachOf({ id: 'main', lengthKm: 4, Q: 9, W: 24, H: 0.95, U: 0.395, D: 15, e: 0.04 }, { downstreamReachId: 'below' }),
        reachOf({ id: 'side', lengthKm: 4, Q: 3, W: 14, H: 0.6, U: 0.4, D: 10, e: 0.04 }, { downstreamReachId: 'below', joinsOnBank, centreline: [[...at(4_000, 4_000), 4], [...at(4_000, 0), 0]] }),
        reachOf({ id: 'below', lengthKm: 20, Q: 12, W: 30, H: 1, U: 0.4, D: 18, e: 0.05 }, { centreline: [[...at(4_000, 0), 20], [...at(24_000, 0), 0]] }),
      ],
      { releases: [release({ channel: channel('main', 3, 'mid') })] },
    );

  it('puts the water on its side of the joined river, in shares of the discharge', () => {
    const [main, side, below] = reachStates(joined('left').water as RiverWater);
    expect(shareAt(main!, below!, [main!, side!, below!])).toEqual({ low: 0.25, share: 0.75 });
    expect(shareAt(side!, below!, [main!, side!, below!])).toEqual({ low: 0, share: 0.25 });
  });

  it('leaves the bank of the clean tributary clean at first, and mixes far below', () => {
    const doc = joined('left');
    const t = (km: number): number => 3_000 / 0.395 + ((20 - km) * 1_000) / 0.4;
    const near = { left: responseAt(doc, 'below', 19.995, 'left')(t(19.995)), right: responseAt(doc, 'below', 19.995, 'right')(t(19.995)) };
    expect(near.left).toBeLessThan(1e-6 * near.right);
    const far = { left: responseAt(doc, 'below', 0, 'left')(t(0)), right: responseAt(doc, 'below', 0, 'right')(t(0)) };
    expectClose(far.left, far.right, 0.02);
  });

  it('is the mirror of itself when the tributary changes bank', () => {
    for (const km of [19.8, 18, 12]) {
      const t = 3_000 / 0.395 + ((20 - km) * 1_000) / 0.4;
      const a = responseAt(joined('left'), 'below', km, 'right')(t);
      expectClose(responseAt(joined('right'), 'below', km, 'left')(t), a, 1e-10);
    }
  });

  it('thins the section mean by the discharge and keeps the mean over the section', () => {
    const before = { kind: 'source', eta0: 0.5, startTau: 0 } as const;
    const after = afterConfluence(before, 0.02, 0.25, 0.75);
    for (const tau of [1e-4, 0.01, 0.2]) {
      const n = 2_000;
      let mean = 0;
      for (let i = 0; i < n; i++) mean += acrossAt(after, (i + 0.5) / n, tau) / n;
      // Midpoint rule on a front 14 cells wide.
      expectClose(mean, 1, 1e-6);
    }
  });

  it('squeezes the profile without change of shape', () => {
    const before = { kind: 'source', eta0: 0.3, startTau: 0 } as const;
    const after = afterConfluence(before, 0.02, 0.25, 0.75);
    // Inside its own water, away from the front, the profile is the old one over its share; 1e-2 covers the front's 1 % width.
    for (const eta of [0.4, 0.6, 0.8]) expectClose(acrossAt(after, eta, 0), betweenWalls((eta - 0.25) / 0.75, 0.3, 0.02) / 0.75, 1e-2);
  });
});

describe('hydraulics at a set discharge', () => {
  const rows = [
    { flowName: 'Q95', exceededPercent: 95, dischargeM3s: 5.2, widthM: 28.4, depthM: 0.74, velocityMps: 0.248 },
    { flowName: 'Q50', exceededPercent: 50, dischargeM3s: 14, widthM: 32, depthM: 1.15, velocityMps: 0.38 },
  ];

  it('passes through the named flows', () => {
    for (const row of rows) expectClose(powerLaw(rows, 'depthM', row.dischargeM3s), row.depthM, 1e-12);
  });

  it('keeps width times depth times velocity equal to the discharge', () => {
    // The rows are rounded to two or three digits: their own product is off by up to 0.3 %, more when carried on.
    for (const Q of [2, 8, 11, 30]) expectClose(powerLaw(rows, 'widthM', Q) * powerLaw(rows, 'depthM', Q) * powerLaw(rows, 'velocityMps', Q), Q, 1e-2);
  });

  it('uses the stated exponents where one flow alone is known', () => {
    expectClose(powerLaw([rows[1]!], 'velocityMps', 28), 0.38 * 2 ** 0.43, 1e-12);
    expectClose(powerLaw([rows[1]!], 'widthM', 28) * powerLaw([rows[1]!], 'depthM', 28) * powerLaw([rows[1]!], 'velocityMps', 28), 2 * 32 * 1.15 * 0.38, 1e-12);
  });
});
