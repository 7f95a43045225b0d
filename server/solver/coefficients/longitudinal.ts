import { dispersionFischer, GRAVITY_MPS2 } from '../physics/channel-mixing';

/** A cross-section with its flow: width W, mean depth H, mean velocity U, shear velocity u*; SI. */
export type ChannelFlow = { readonly widthM: number; readonly depthM: number; readonly speedMps: number; readonly shearMps: number; readonly slope?: number };

export type DispersionFormula = {
  readonly id: string;
  readonly name: string;
  readonly formula: string;
  readonly source: string;
  /** m2/s; null where it needs a figure that is not given. */
  readonly of: (flow: ChannelFlow) => number | null;
};

/** Data behind the regressions: natural streams, evenly mixed across. */
export const FITTED_RANGE = { widthOverDepth: [10, 150], speedOverShear: [1, 20] } as const;

type Figures = { W: number; H: number; U: number; u: number; slope: number | undefined };
const formula = (id: string, name: string, text: string, source: string, of: (f: Figures) => number | null): DispersionFormula => ({
  id,
  name,
  formula: text,
  source,
  of: ({ widthM, depthM, speedMps, shearMps, slope }) => of({ W: widthM, H: depthM, U: speedMps, u: shearMps, slope }),
});

/**
 * Published longitudinal dispersion coefficients of rivers, m2/s. None is meant for canals, ice, tides or lakes. Their
 * authors fitted many of the same rivers, so that agreement with those is no test of its own.
 */
export const dispersionFormulas: readonly DispersionFormula[] = [
  formula('elder', 'Elder', '5.93 H u*', 'Elder 1959, J. Fluid Mech. 5: 544; shear over depth alone, far too low for whole rivers', ({ H, u }) => 5.93 * H * u),
  formula('mcquivey-keefer', 'McQuivey & Keefer', '0.058 Q/(S W), Froude number below 0.5', 'McQuivey & Keefer 1974, J. Environ. Eng. Div. ASCE 100: 997 (from memory)', ({ W, H, U, slope }) =>
    slope === undefined || froude(U, H) >= 0.5 ? null : (0.058 * W * H * U) / (slope * W),
  ),
  formula('fischer', 'Fischer', '0.011 U² W²/(H u*)', 'Fischer et al. 1979, eq. 5.19', ({ W, H, U, u }) => dispersionFischer(U, W, H, u)),
  formula('liu', 'Liu', '0.18 (u*/U)^1.5 U² W²/(H u*)', 'Liu 1977, J. Environ. Eng. Div. ASCE 103: 59', ({ W, H, U, u }) => (0.18 * (u / U) ** 1.5 * U * U * W * W) / (H * u)),
  formula('iwasa-aya', 'Iwasa & Aya', '2 (W/H)^1.5 H u*', 'Iwasa & Aya 1991, Environmental Hydraulics, Hong Kong: 505', ({ W, H, u }) => 2 * (W / H) ** 1.5 * H * u),
  formula('koussis-rodriguez', 'Koussis & Rodríguez-Mirasol', '0.6 u* W²/H', 'Koussis & Rodríguez-Mirasol 1998, J. Hydraul. Eng. 124: 317 (from memory)', ({ W, H, u }) => (0.6 * u * W * W) / H),
  // Some copies print 5.195; only 5.915 closes with the two-branch form below.
  formula('seo-cheong', 'Seo & Cheong', '5.915 (W/H)^0.620 (U/u*)^1.428 H u*', 'Seo & Cheong 1998, J. Hydraul. Eng. 124: 25', ({ W, H, U, u }) => 5.915 * (W / H) ** 0.62 * (U / u) ** 1.428 * H * u),
  formula('li', 'Li et al.', '0.2 (W/H)^1.3 (U/u*)^1.2 H u*', 'Li, Liu & Yin 1998, as listed publicly', ({ W, H, U, u }) => 0.2 * (W / H) ** 1.3 * (U / u) ** 1.2 * H * u),
  formula('deng', 'Deng, Singh & Bengtsson', '(0.15/(8 ε)) (W/H)^(5/3) (U/u*)² H u*, ε = 0.145 + (U/u*)(W/H)^1.38/3520', 'Deng, Singh & Bengtsson 2001, J. Hydraul. Eng. 127: 919 (ε from memory)', ({ W, H, U, u }) =>
    (0.15 / (8 * (0.145 + ((U / u) * (W / H) ** 1.38) / 3_520))) * (W / H) ** (5 / 3) * (U / u) ** 2 * H * u,
  ),
  formula('kashefipour-falconer', 'Kashefipour & Falconer, simple', '10.612 (U/u*) H U', 'Kashefipour & Falconer 2002, Water Res. 36: 1596', ({ H, U, u }) => 10.612 * (U / u) * H * U),
  formula('kashefipour-falconer-two', 'Kashefipour & Falconer, two branches', 'W/H > 50: 10.612 (U/u*) H U; else [7.428 + 1.775 (W/H)^0.62 (u*/U)^0.572] (U/u*) H U', 'Kashefipour & Falconer 2002, Water Res. 36: 1596', ({ W, H, U, u }) =>
    (W / H > 50 ? 10.612 : 7.428 + 1.775 * (W / H) ** 0.62 * (u / U) ** 0.572) * (U / u) * H * U,
  ),
  formula('sahay-dutta', 'Sahay & Dutta', '2 (W/H)^0.96 (U/u*)^1.25 H u*', 'Sahay & Dutta 2009, Hydrol. Res. 40: 544', ({ W, H, U, u }) => 2 * (W / H) ** 0.96 * (U / u) ** 1.25 * H * u),
  // With u* in place of the last U, as one copy has it, rivers come out at a fifth of what was measured.
  formula('zeng-huai', 'Zeng & Huai', '5.4 (W/H)^0.7 (U/u*)^0.13 H U', 'Zeng & Huai 2014, J. Hydro-environ. Res. 8: 2', ({ W, H, U, u }) => 5.4 * (W / H) ** 0.7 * (U / u) ** 0.13 * H * U),
  formula('disley', 'Disley et al.', '3.563 Fr^-0.4117 (W/H)^0.6776 (U/u*)^1.0132 H u*', 'Disley, Gharabaghi, Mahboubi & McBean 2015, Hydrol. Process. 29: 161', ({ W, H, U, u }) =>
    3.563 * froude(U, H) ** -0.4117 * (W / H) ** 0.6776 * (U / u) ** 1.0132 * H * u,
  ),
  formula('natural-streams', 'Quick rule of natural streams', '250 H u*, scatter 20 to 7,500', 'Fischer et al. 1979, section 5.2', ({ H, u }) => 250 * H * u),
];

const froude = (U: number, H: number): number => U / Math.sqrt(GRAVITY_MPS2 * H);

/** The five whose median lies closest to measured rivers. */
const RECOMMENDED = ['seo-cheong', 'kashefipour-falconer-two', 'sahay-dutta', 'zeng-huai', 'disley'];
/** Data scatter about any of them by this factor either way; the peak by its square root. */
export const DISPERSION_BAND = 3;

export type DispersionAdvice = { readonly medianM2s: number; readonly lowM2s: number; readonly highM2s: number; readonly least: number; readonly most: number; readonly isInRange: boolean };

/** Median of five recent regressions with a band of a factor of 3, and what the five span, m2/s. */
export function adviseDispersion(flow: ChannelFlow): DispersionAdvice {
  const values = dispersionFormulas
    .filter(({ id }) => RECOMMENDED.includes(id))
    .map((item) => item.of(flow)!)
    .sort((a, b) => a - b);
  const medianM2s = values[2]!;
  const within = (value: number, [low, high]: readonly [number, number]): boolean => value >= low && value <= high;
  return {
    medianM2s,
    lowM2s: medianM2s / DISPERSION_BAND,
    highM2s: medianM2s * DISPERSION_BAND,
    least: values[0]!,
    most: values[4]!,
    isInRange: within(flow.widthM / flow.depthM, FITTED_RANGE.widthOverDepth) && within(flow.speedMps / flow.shearMps, FITTED_RANGE.speedOverShear),
  };
}
