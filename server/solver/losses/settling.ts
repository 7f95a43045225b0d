import { GRAVITY_MPS2 } from '../physics/channel-mixing';

/** Kinematic viscosity of water at 20 °C, m2/s. */
const VISCOSITY = 1e-6;
const WATER_KGM3 = 1_000;

const buoyancy = (densityKgM3: number): number => Math.max(0, (densityKgM3 - WATER_KGM3) / WATER_KGM3);

/** R g d^2 / (18 nu), m/s: spheres below a Reynolds number of 1, quartz below 0.1 mm. Source: Stokes 1851. */
export const stokesMps = (diameterM: number, densityKgM3: number): number => (buoyancy(densityKgM3) * GRAVITY_MPS2 * diameterM ** 2) / (18 * VISCOSITY);

/** Constants for smooth spheres and for natural grains. Source: Ferguson & Church 2004, J. Sediment. Res. 74: 933. */
export const GRAIN_C2 = { sphere: 0.4, natural: 1 } as const;

/**
 * R g d^2 / (18 nu + sqrt(0.75 C2 R g d^3)), m/s: Stokes for fine grains, constant drag for coarse ones.
 * Source: Ferguson & Church 2004, J. Sediment. Res. 74: 933, eq. 4.
 */
export function fergusonChurchMps(diameterM: number, densityKgM3: number, shape: keyof typeof GRAIN_C2): number {
  const rg = buoyancy(densityKgM3) * GRAVITY_MPS2;
  return (rg * diameterM ** 2) / (18 * VISCOSITY + Math.sqrt(0.75 * GRAIN_C2[shape] * rg * diameterM ** 3));
}
