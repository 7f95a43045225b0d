import type { Hydraulics } from './hydraulics';

/** Cells of a wave along one reach, and its times kept. */
const CELL_M = 200;
const MOST_CELLS = 60;
const MOST_LEVELS = 900;
const COURANT = 0.9;
/** Faster than any long wave in a river, U + √(g H): such a reach holds no more water at a higher discharge. */
const AT_ONCE_MPS = 30;

/** Discharge against time, m3/s. */
export type Hydrograph = (tS: number) => number;

/** Discharge along one reach against time, kept at faces of even cells and even times, linear between. */
export class ReachWave {
  constructor(
    private readonly values: Float64Array,
    private readonly faces: number,
    private readonly fromS: number,
    private readonly levelS: number,
    private readonly lengthM: number,
  ) {}

  dischargeM3s(xM: number, tS: number): number {
    const levels = this.values.length / this.faces;
    const a = Math.min(levels - 1.000001, Math.max(0, (tS - this.fromS) / this.levelS));
    const b = Math.min(this.faces - 1.000001, Math.max(0, (xM / this.lengthM) * (this.faces - 1)));
    const [i, j] = [Math.floor(a), Math.floor(b)];
    const at = i * this.faces + j;
    const now = this.values[at]! + (b - j) * (this.values[at + 1]! - this.values[at]!);
    const next = this.values[at + this.faces]! + (b - j) * (this.values[at + this.faces + 1]! - this.values[at + this.faces]!);
    return now + (a - i) * (next - now);
  }

  get outflow(): Hydrograph {
    return (tS) => this.dischargeM3s(this.lengthM, tS);
  }
}

/**
 * Kinematic wave down one reach: dA/dt + dQ/dx = 0 with A = A(Q) from the power laws, so that a change runs with
 * celerity dQ/dA = U/(1 - b), b the exponent of velocity: 5/3 U for Manning's b = 0.4. First-order upwind cells, which
 * keep the water and flatten a steep front over a few cells as friction does.
 * Source: Lighthill & Whitham 1955, Proc. R. Soc. A 229: 281; Chow 1959, chapter 18.
 *
 * Where the section hardly grows with the discharge, as in an estuary held up by the sea, a change passes at once.
 *
 * @param inflow  discharge at the head; the reach starts even at its first value
 */
export function reachWave(hydraulics: Hydraulics, lengthM: number, inflow: Hydrograph, fromS: number, toS: number): ReachWave {
  if (hydraulics.largestCelerityMps > AT_ONCE_MPS) return passedAtOnce(lengthM, inflow, fromS, toS);
  const cells = Math.min(MOST_CELLS, Math.max(4, Math.ceil(lengthM / CELL_M)));
  const cellM = lengthM / cells;
  const stepS = Math.min((COURANT * cellM) / hydraulics.largestCelerityMps, (toS - fromS) / 50);
  const perLevel = Math.max(1, Math.ceil((toS - fromS) / stepS / MOST_LEVELS));
  const levelS = perLevel * stepS;
  const levels = Math.ceil((toS - fromS) / levelS) + 2;
  const faces = cells + 1;
  const values = new Float64Array(levels * faces);
  const first = inflow(fromS);
  const area = new Float64Array(cells).fill(hydraulics.areaM2(first));
  const face = new Float64Array(faces).fill(first);
  for (let level = 0, tS = fromS; level < levels; level++) {
    values.set(face, level * faces);
    for (let k = 0; k < perLevel; k++, tS += stepS) {
      // The mean over the step, so that the water let in is the water of the series.
      face[0] = meanOver(inflow, tS, stepS);
      for (let i = 0; i < cells; i++) area[i]! += (stepS / cellM) * (face[i]! - face[i + 1]!);
      face[0] = inflow(tS + stepS);
      for (let i = 0; i < cells; i++) face[i + 1] = hydraulics.dischargeM3s(area[i]!);
    }
  }
  return new ReachWave(values, faces, fromS, levelS, lengthM);
}

const PARTS = 16;

function meanOver(inflow: Hydrograph, fromS: number, stepS: number): number {
  let sum = 0;
  for (let i = 0; i < PARTS; i++) sum += inflow(fromS + (stepS * (i + 0.5)) / PARTS);
  return sum / PARTS;
}

function passedAtOnce(lengthM: number, inflow: Hydrograph, fromS: number, toS: number): ReachWave {
  const levelS = (toS - fromS) / MOST_LEVELS;
  const values = Float64Array.from({ length: 2 * (MOST_LEVELS + 2) }, (_, i) => inflow(fromS + Math.floor(i / 2) * levelS));
  return new ReachWave(values, 2, fromS, levelS, lengthM);
}
