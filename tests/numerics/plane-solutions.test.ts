import { describe, it } from 'vitest';
import { currentOf } from '../../server/solver/open/current';
import { turningSpread } from '../../server/solver/open/spread';
import { normalDensity2, shearCovariance, slenderPlume2, steadyPlume2, steadyPlume3 } from '../../server/solver/physics/plane';
import { lineDischargeDilution, okuboDiffusivityM2s, okuboVarianceM2 } from '../../server/solver/physics/spreading';
import { wallsByCosines, wallsByImages, betweenWalls } from '../../server/solver/physics/two-walls';
import { normalDensity } from '../../server/solver/physics/line';
import { expectClose } from './close-to';

describe('a cloud whose axes turn in a tidal ellipse', () => {
  const w = (2 * Math.PI) / 44_712;
  const t = 20_000;
  // u = 0.05 + 0.60 cos(wt + 0.4), v = -0.02 + 0.15 sin(wt + 0.4).
  const current = currentOf([
    { kind: 'residual', speedMps: Math.hypot(0.05, 0.02), towardDeg: (Math.atan2(0.05, -0.02) * 180) / Math.PI },
    { kind: 'tide', name: 'M2', majorMps: 0.6, minorMps: 0.15, floodTowardDeg: 90, periodS: 44_712, maxFloodS: -0.4 / w },
  ]);
  const centre = new Float64Array(2);
  current.displacement(t, centre);
  const covariance = new Float64Array(3);
  turningSpread(12, 1.5, (s, out) => { out[0] = Math.cos(2 * (0.3 + w * s)); out[1] = Math.sin(2 * (0.3 + w * s)); }, [0, t]).gained(0, t, covariance);

  it('moves by the exact integral of the current', () => {
    expectClose(centre[0]!, -956.7319649171, 1e-11);
    expectClose(centre[1]!, 1_648.045433508, 1e-11);
  });

  it('sums its tensor in fixed axes', () => {
    expectClose(covariance[0]!, 246_584.44204696, 1e-9);
    expectClose(covariance[1]!, -6_453.2647685829, 1e-9);
    expectClose(covariance[2]!, 293_415.55795304, 1e-9);
  });

  it('gives the concentration of the independent Fourier solution', () => expectClose((500 / 8) * normalDensity2(300, -200, covariance[0]!, covariance[1]!, covariance[2]!), 2.89404357277e-5));
});

describe('steady plumes', () => {
  it.each([
    [200, 0, 0.00320899273243, 0.00323570663714],
    [200, 15, 0.00208798351464, 0.0021220282204],
    [1_000, 20, 0.00120934683644, 0.00121271508306],
  ])('in two dimensions at (%d, %d), full and slender', (x, y, full, slender) => {
    expectClose(0.2 * steadyPlume2(x, y, 5, 0.3, 2, 0.2, 1e-5), full);
    expectClose(0.2 * slenderPlume2(x, y, 5, 0.3, 0.2, 1e-5), slender);
  });

  it('in two dimensions upstream of the source', () => expectClose(0.2 * steadyPlume2(-5, 0, 5, 0.3, 2, 0.2, 1e-5), 0.00810037278947));

  it('in three dimensions', () => expectClose(0.05 * steadyPlume3(100, 4, 1, 0.25, 0.5, 0.1, 0.005, 0), 0.00140968085094));
});

describe('between two walls', () => {
  // Concentration over the even spread, by tau = K x / (U W^2); images, cosines and the theta identity agree.
  it.each([
    [0, 0.005, 7.97884560803, 2.97343902947e-5, 3.07783945068e-21],
    [0, 0.02, 3.98942280401, 0.175283004938, 2.97343902947e-5],
    [0, 0.1, 1.78428611437, 0.961407671463, 0.292899651842],
    [0, 0.4, 1.03859288311, 0.999999722715, 0.961407671463],
    [0.3, 0.005, 0.0886369682388, 0.539909665132, 1.82694408167e-10],
    [0.3, 0.02, 1.29517595666, 1.2105228041, 0.00872682962001],
    [0.3, 0.1, 1.42595437772, 1.01192554673, 0.550193631515],
    [0.3, 0.4, 1.02268407886, 1.00000008569, 0.977315749764],
    [0.5, 0.02, 0.175283004938, 1.9947262692, 0.175283004938],
    [0.5, 0.1, 0.961407671463, 1.03859288311, 0.961407671463],
  ])('source at %d W, tau %d', (y0, tau, left, mid, right) => {
    expectClose(betweenWalls(0, y0, tau), left);
    expectClose(betweenWalls(0.5, y0, tau), mid);
    expectClose(betweenWalls(1, y0, tau), right);
  });

  it('images and cosines are one function', () => {
    for (const tau of [0.02, 0.1, 0.16, 0.25, 1]) for (const y of [0, 0.25, 0.6, 1]) expectClose(wallsByCosines(y, 0.2, tau), wallsByImages(y, 0.2, tau), 1e-9);
  });

  it('keeps all matter between the walls', () => {
    for (const tau of [0.001, 0.05, 0.159, 0.161, 2]) {
      const n = 4_000;
      let mean = 0;
      for (let i = 0; i < n; i++) mean += betweenWalls((i + 0.5) / n, 0.37, tau) / n;
      // Midpoint rule on 4,000 cells resolves the narrowest curve (sigma 0.045) to 1e-10.
      expectClose(mean, 1, 1e-9);
    }
  });

  it('a slug from a bank in a channel: M 200 kg, h 3 m, U 0.5 m/s, Kx 8, Ky 0.06, W 60 m', () => {
    const at = (x: number, y: number, t: number): number => ((200 / 3) * normalDensity(x, 0.5 * t, 2 * 8 * t) * betweenWalls(y / 60, 0, (0.06 * t) / 3_600)) / 60;
    expectClose(at(450, 0, 900), 0.0170163239328);
    expectClose(at(1_800, 60, 3_600), 1.31909297524e-4);
  });

  it('three dimensions between bed and surface', () => {
    const at = (x: number, y: number, z: number, t: number): number => (10 * normalDensity(x, 0.2 * t, 2 * 0.5 * t) * normalDensity(y, 0, 2 * 0.05 * t) * betweenWalls(z / 6, 1.5 / 6, (0.004 * t) / 36)) / 6;
    expectClose(at(130, 2, 0.5, 600), 0.00212086194222);
    expectClose(at(380, 5, 5.5, 1_800), 3.15208452923e-4);
  });
});

describe('spreading laws', () => {
  // Okubo 1971, Deep-Sea Research 18: 789.
  it.each([
    [3_600, 10.6432, 0.0157329],
    [86_400, 438.448, 1.11248],
    [604_800, 4_272.51, 15.0912],
    [2_592_000, 23_450.4, 106.08],
  ])('patches in the sea at %d s', (t, sigma, diffusivity) => {
    expectClose(Math.sqrt(okuboVarianceM2(t)), sigma, 5e-6);
    expectClose(okuboDiffusivityM2s(t), diffusivity, 5e-6);
  });

  // Brooks 1960: b 100 m, U 0.2 m/s, K0 0.5 m2/s, x 2 km.
  it.each([
    ['constant', 0.38292492254802],
    ['linear', 0.19741265136584],
    ['four-thirds', 0.12360654892441],
  ] as const)('a line of discharge with %s growth', (law, wanted) => expectClose(lineDischargeDilution(law, 2_000, 100, 0.2, 0.5), wanted));

  it('a simple shear feeds the spread along', () => {
    const { sxx, sxy, syy } = shearCovariance(7_200, 0.002, 0.5, 0.1);
    expectClose(sxx, 106_732.8, 1e-12);
    expectClose(sxy, 10_368, 1e-12);
    expectClose(syy, 1_440, 1e-12);
  });
});
