import type { Mixing } from '../../../shared/schemas/estimate';
import type { ReleaseProfile } from '../release-profile';
import type { BoundedWater } from './bounded-water';
import { LAND } from './cell-grid';
import { velocityAt } from './flow-modes';
import { latticeShares, type LatticeShare } from './lattice';
import type { FaceFlow } from './projection';
import { lineScratch, openSteps, spreadAlong, spreadingLines, type SpreadingLines } from './spreading-lines';

const RAD = Math.PI / 180;
/** Directions a turning tensor is rounded to: half a step is 1.4 degrees. */
const DIRECTIONS = 64;

/**
 * Spreading of all fields of a run: the lines along which cells exchange, made anew when a turning tensor has turned.
 * `apply` runs them one after the other, forwards or backwards (splitting made symmetric over two steps, Marchuk 1968).
 */
export class Spreading {
  private lines: SpreadingLines[] = [];
  private largestM2s = 0;
  private readonly directions: Uint8Array | null;
  private readonly shares: LatticeShare[][] = [];
  private readonly open = new Map<string, Uint8Array>();
  private readonly scratch;
  private readonly velocity = new Float64Array(2);

  constructor(private readonly water: BoundedWater, private readonly mixing: Mixing) {
    const { grid } = water;
    this.scratch = lineScratch(grid);
    const turns = mixing.kind === 'constant' && mixing.turnsWithCurrent && mixing.alongM2s !== mixing.acrossM2s;
    // 255: not yet set.
    this.directions = turns ? new Uint8Array(grid.isWater.length).fill(255) : null;
    if (mixing.kind !== 'constant') this.setUniform([{ a: 1, b: 0, weight: 1 }, { a: 0, b: 1, weight: 1 }]);
    else if (turns) for (let n = 0; n < DIRECTIONS; n++) this.shares.push(tensorShares(mixing.alongM2s, mixing.acrossM2s, (Math.PI * n) / DIRECTIONS));
    else this.setUniform(tensorShares(mixing.alongM2s, mixing.acrossM2s, Math.PI / 2 - mixing.axisTowardDeg * RAD));
  }

  /** Largest weight of any line, m2/s (for spreading that grows with age: times its own coefficient). */
  get strongestM2s(): number {
    return this.largestM2s;
  }

  private setUniform(shares: readonly LatticeShare[]): void {
    const { isWater } = this.water.grid;
    this.setLines(shares.map(({ a, b, weight }) => ({ a, b, weights: Float64Array.from(isWater, (wet) => (wet === LAND ? 0 : weight)) })));
  }

  private setLines(steps: readonly { a: number; b: number; weights: Float64Array }[]): void {
    const { grid } = this.water;
    this.lines = steps.map((step) => {
      const key = `${step.a} ${step.b}`;
      const open = this.open.get(key) ?? openSteps(grid, step.a, step.b);
      this.open.set(key, open);
      return spreadingLines(grid, step, open);
    });
    this.largestM2s = steps.reduce((most, { weights }) => weights.reduce((m, w) => Math.max(m, w), most), 0);
  }

  /** Turns the axes with the flow, cell by cell; at dead slack the stated axis stands in. */
  turn(flow: FaceFlow): void {
    const { directions, mixing, water, velocity, shares } = this;
    if (!directions || mixing.kind !== 'constant') return;
    const { isWater } = water.grid;
    let changed = 0;
    for (let cell = 0; cell < directions.length; cell++) {
      if (isWater[cell] === LAND) continue;
      velocityAt(water, flow, cell, velocity);
      const isSlack = Math.hypot(velocity[0]!, velocity[1]!) < 1e-12;
      const angle = isSlack ? Math.PI / 2 - mixing.axisTowardDeg * RAD : Math.atan2(velocity[1]!, velocity[0]!);
      const direction = ((Math.round((angle / Math.PI) * DIRECTIONS) % DIRECTIONS) + DIRECTIONS) % DIRECTIONS;
      if (direction !== directions[cell]) changed++;
      directions[cell] = direction;
    }
    if (changed === 0) return;
    const steps = new Map<string, { a: number; b: number; weights: Float64Array }>();
    for (let cell = 0; cell < directions.length; cell++) {
      if (isWater[cell] === LAND) continue;
      for (const { a, b, weight } of shares[directions[cell]!]!) {
        const key = `${a} ${b}`;
        const step = steps.get(key) ?? { a, b, weights: new Float64Array(directions.length) };
        steps.set(key, step);
        step.weights[cell] = weight;
      }
    }
    this.setLines([...steps.values()].sort((p, q) => p.a - q.a || p.b - q.b));
  }

  /** Spreads a field over a step; `coefficient` multiplies all weights (1, or a growing coefficient in m2/s). */
  apply(c: Float64Array, volume: Float64Array, dtS: number, coefficient: number, isBackwards: boolean): void {
    const factor = (coefficient * dtS) / this.water.grid.dxM ** 2;
    if (factor === 0) return;
    const { lines, scratch } = this;
    for (let n = 0; n < lines.length; n++) spreadAlong(lines[isBackwards ? lines.length - 1 - n : n]!, c, volume, factor, scratch);
  }
}

/** Shares of a tensor whose long axis points `angle` anticlockwise from east. */
function tensorShares(alongM2s: number, acrossM2s: number, angle: number): LatticeShare[] {
  const [cos, sin] = [Math.cos(angle), Math.sin(angle)];
  return latticeShares(alongM2s * cos * cos + acrossM2s * sin * sin, (alongM2s - acrossM2s) * sin * cos, alongM2s * sin * sin + acrossM2s * cos * cos);
}

const AGES = 8;

/**
 * Mean coefficient over a step of matter whose spread grows with its age or size, m2/s: half the growth of the variance,
 * averaged over what has been released by then in equal shares.
 */
export function growingCoefficient(profile: ReleaseProfile, varianceAt: (ageS: number) => number, fromS: number, toS: number): number {
  const gain = (releasedS: number): number => (varianceAt(Math.max(0, toS - releasedS)) - varianceAt(Math.max(0, fromS - releasedS))) / (2 * (toS - fromS));
  if (profile.isInstant) return gain(profile.startS);
  const lastS = Math.min(toS, profile.stopS);
  let sum = 0;
  for (let n = 0; n < AGES; n++) sum += gain(profile.startS + ((lastS - profile.startS) * (n + 0.5)) / AGES) / AGES;
  return sum;
}
