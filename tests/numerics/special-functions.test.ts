import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { besselI1e, besselK0e } from '../../server/solver/math/bessel';
import { erf, erfc, erfcx } from '../../server/solver/math/erf';
import { IntegralTable } from '../../server/solver/math/function-table';
import { AdaptiveQuadrature, gaussLegendre } from '../../server/solver/math/quadrature';
import { findMaximum, findRoot } from '../../server/solver/math/roots';
import { Meter } from '../../server/solver/meter';
import { expectClose } from './close-to';

// Tables: Abramowitz & Stegun 1964, chapters 7 and 9; digits beyond the printed ones by multi-precision arithmetic.
describe('special functions', () => {
  it.each([
    [0.5, 0.615690344192926],
    [1, 0.427583576155807],
    [2, 0.255395676310506],
    [3, 0.17900115118139],
    [5, 0.110704637733069],
    [10, 0.0561409927438226],
    [50, 0.0112815362653238],
  ])('erfcx(%d) agrees with the table', (z, wanted) => expectClose(erfcx(z), wanted, 1e-13));

  it.each([
    [0.1, 0.112462916018285],
    [0.5, 0.520499877813047],
    [1, 0.842700792949715],
    [2, 0.995322265018953],
  ])('erf(%d) agrees with the table', (z, wanted) => expectClose(erf(z), wanted, 5e-15 / wanted));

  it('erfc keeps relative accuracy in its tail', () => {
    expectClose(erfc(3), 2.20904969985854e-5, 1e-13);
    expectClose(erfc(5), 1.53745979442803e-12, 1e-13);
  });

  it.each([
    [0.01, 4.72124473016109],
    [0.1, 2.42706902470202],
    [1, 0.421024438240708],
    [5, 0.00369109833404259],
    [20, 5.74123781533652e-10],
  ])('K0(%d) agrees with the table', (x, wanted) => expectClose(besselK0e(x) * Math.exp(-x), wanted, 1e-12));

  it.each([
    [0.1, 0.0452984468088093],
    [1, 0.207910415349708],
    [5, 0.163972266944542],
    [20, 0.0875062221832887],
  ])('exp(-x) I1(x) at %d agrees with the table', (x, wanted) => expectClose(besselI1e(x), wanted, 1e-12));

  it('erf and erfc add to one, and erf is odd', () =>
    fc.assert(
      fc.property(fc.double({ min: -6, max: 6, noNaN: true }), (z) => {
        expect(erf(z) + erfc(z)).toBeCloseTo(1, 13);
        expect(erf(-z)).toBe(-erf(z));
      }),
    ));

  it('the two ranges of erfcx meet', () => expectClose(erfcx(1.75 - 1e-13), erfcx(1.75), 1e-12));
});

describe('numerical aids', () => {
  it('Gauss-Legendre with n points is exact for degree 2n - 1', () => {
    const { x, w } = gaussLegendre(6);
    for (let degree = 0; degree <= 11; degree++) {
      const sum = x.reduce((total, node, i) => total + w[i]! * node ** degree, 0);
      expect(sum).toBeCloseTo(degree % 2 === 0 ? 2 / (degree + 1) : 0, 13);
    }
  });

  it('adaptive quadrature reaches its tolerance on a narrow peak that the caller points out', () => {
    const quadrature = new AdaptiveQuadrature(new Meter());
    const narrow = (x: number): number => Math.exp(-((x - 0.7) ** 2) / (2 * 1e-6)) / Math.sqrt(2 * Math.PI * 1e-6);
    const value = quadrature.integrate(narrow, [0, 1], 1e-10, (a, b) => (b < 0.69 || a > 0.71 ? 'skip' : b - a > 0.004 ? 'split' : 'take'));
    expectClose(value, 1, 1e-10);
  });

  it('roots and maxima are found to the asked width', () => {
    expect(Math.abs(findRoot((x) => x * x - 2, 0, 5, -2, 23, 1e-12) - Math.SQRT2)).toBeLessThan(1e-11);
    expect(Math.abs(findMaximum((x) => -((x - 1.3) ** 2), 0, 4, 1e-6).x - 1.3)).toBeLessThan(1e-6);
  });

  it('tabulated integrals keep their stated error between the panel ends', () => {
    const table = new IntegralTable((t, out) => { out[0] = Math.cos(t); out[1] = 1 / (1 + t * t); }, 2, [0, 10], 1e-11);
    const out = new Float64Array(2);
    for (let t = 0; t <= 10; t += 0.137) {
      table.at(t, out);
      // 1e-11 per unit of t over 10 units, and a panel's share of it inside.
      expect(Math.abs(out[0]! - Math.sin(t))).toBeLessThan(2e-10);
      expect(Math.abs(out[1]! - Math.atan(t))).toBeLessThan(2e-10);
    }
  });
});
