/** Gas constant, J/(mol K). Source: CODATA 2018, exact. */
const GAS_CONSTANT = 8.314462618;
export const KELVIN = 273.15;
const REFERENCE_K = 298.15;

/**
 * Henry's constant at a water temperature: H(T) = H(298.15 K) exp(-b (1/T - 1/298.15)), Pa m3/mol; b is enthalpy over R, K.
 * Range: 0 to 35 °C, b taken as constant. Source: van 't Hoff; values of b in Sander 2015, Atmos. Chem. Phys. 15: 4399.
 */
export const henryAt = (henry25PaM3Mol: number, slopeK: number, temperatureC: number): number =>
  henry25PaM3Mol * Math.exp(-slopeK * (1 / (temperatureC + KELVIN) - 1 / REFERENCE_K));

/** Air over water at equilibrium, both as concentrations: H' = H / (R T), a plain ratio. */
export const airWaterRatio = (henryPaM3Mol: number, temperatureC: number): number => henryPaM3Mol / (GAS_CONSTANT * (temperatureC + KELVIN));
