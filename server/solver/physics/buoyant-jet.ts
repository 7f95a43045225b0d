import { GRAVITY_MPS2 } from './channel-mixing';

export type Jet = { readonly flowM3s: number; readonly speedMps: number; readonly densityKgM3: number };
/** Lengths over which a jet's own momentum and buoyancy rule, m. */
export type JetLengths = {
  /** Below it the opening itself counts: Q / sqrt(M). */
  readonly openingM: number;
  /** The jet bends into the current: sqrt(M) / U. */
  readonly bendingM: number;
  /** The jet turns into a plume: M^(3/4) / sqrt(B). */
  readonly plumeM: number;
  /** The plume bends into the current: B / U^3. */
  readonly buoyantM: number;
};

/**
 * With Q the flow, M = Q u its momentum flux, B = g |rho - rho_w| / rho_w Q its buoyancy flux and U the current; Infinity in still water.
 * Source: Fischer, List, Koh, Imberger & Brooks 1979, Mixing in Inland and Coastal Waters, section 9.2.
 */
export function jetLengths({ flowM3s, speedMps, densityKgM3 }: Jet, waterKgM3: number, currentMps: number): JetLengths {
  const momentum = flowM3s * speedMps;
  const buoyancy = ((GRAVITY_MPS2 * Math.abs(densityKgM3 - waterKgM3)) / waterKgM3) * flowM3s;
  return {
    openingM: flowM3s / Math.sqrt(momentum),
    bendingM: Math.sqrt(momentum) / currentMps,
    plumeM: buoyancy > 0 ? momentum ** 0.75 / Math.sqrt(buoyancy) : Infinity,
    buoyantM: buoyancy > 0 ? buoyancy / currentMps ** 3 : 0,
  };
}
