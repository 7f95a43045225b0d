/**
 * Shear velocity and mixing coefficients of rivers. SI: width W, mean depth H, mean velocity U, slope S.
 */
export const GRAVITY_MPS2 = 9.81;

/** Where neither slope nor roughness is known: middle of the usual 8 to 20 (common practice, no source). */
export const FALLBACK_U_OVER_USTAR = 10;

/** sqrt(g H S), wide channel. Source: Fischer et al. 1979, section 5.1. */
export const shearVelocityFromSlope = (depthM: number, slope: number): number => Math.sqrt(GRAVITY_MPS2 * depthM * slope);

/** U n sqrt(g) / R^(1/6) with R = W H / (W + 2 H). Source: Manning's formula, Chow 1959, Open-Channel Hydraulics. */
export function shearVelocityFromManning(speedMps: number, n: number, widthM: number, depthM: number): number {
  const radius = (widthM * depthM) / (widthM + 2 * depthM);
  return (speedMps * n * Math.sqrt(GRAVITY_MPS2)) / radius ** (1 / 6);
}

/** 0.011 U^2 W^2 / (H u*), m2/s. Source: Fischer et al. 1979, eq. 5.19. Scatter of data: a factor of about 3 either way. */
export const dispersionFischer = (U: number, W: number, H: number, uStar: number): number => (0.011 * U * U * W * W) / (H * uStar);

/** 0.6 H u*, m2/s, plus or minus half, for gently meandering rivers. Source: Fischer et al. 1979, section 5.1.3. */
export const transverseFischer = (H: number, uStar: number): number => 0.6 * H * uStar;

/** 0.067 H u*, m2/s. Source: Elder 1959, J. Fluid Mech. 5: 544. */
export const verticalElder = (H: number, uStar: number): number => 0.067 * H * uStar;

/** Distance to even mixing over depth from a surface or bed source, m: 0.4 U H^2 / (0.067 H u*). */
export const depthMixingLengthM = (U: number, H: number, uStar: number): number => (0.4 * U * H * H) / verticalElder(H, uStar);

/** Distance to even mixing across, m: 0.4 U W^2 / e for a source on a bank, 0.1 for mid-channel. Source: Fischer et al. 1979, eq. 5.10. */
export const acrossMixingLengthM = (U: number, W: number, transverseM2s: number, isMid: boolean): number => ((isMid ? 0.1 : 0.4) * U * W * W) / transverseM2s;
