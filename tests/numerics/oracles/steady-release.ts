import type { SteadyRelease } from '../../../server/solver/kernels/release';

/** Concentration at a point by Simpson's rule in the age itself, with as many steps as asked for. */
export function plainRelease(x: number, y: number, r: SteadyRelease, steps = 100_000): number {
  const f = (age: number): number => {
    const sx2 = r.startSigmaM ** 2 + 2 * r.alongM2s * age;
    const sy2 = r.startSigmaM ** 2 + 2 * r.acrossM2s * age;
    return Math.exp(-((x - r.currentMps * age) ** 2) / (2 * sx2) - y ** 2 / (2 * sy2) - r.decayPerS * age) / Math.sqrt(sx2 * sy2);
  };
  const h = (r.oldestS - r.youngestS) / steps;
  let sum = f(r.youngestS) + f(r.oldestS);
  for (let k = 1; k < steps; k++) sum += (k % 2 === 1 ? 4 : 2) * f(r.youngestS + k * h);
  return ((r.rateKgS / (2 * Math.PI * r.depthM)) * sum * h) / 3;
}
