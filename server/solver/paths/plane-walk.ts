import type { Meter } from '../meter';
import { STEP_FIGURES, type PathMotion } from './motion';
import type { PathRandom } from './random';
import type { Walls } from './walls';

export type PlaneWalkInput = {
  readonly motion: PathMotion;
  /** Null: nothing stands in the way. */
  readonly walls: Walls | null;
  /** A straight shore besides: a point on it and its direction; paths stay on the side of their release. */
  readonly line: { readonly x: number; readonly y: number; readonly ex: number; readonly ey: number } | null;
  readonly x: number;
  readonly y: number;
  /** Variance of the first cloud along each axis, m2. */
  readonly startVarianceM2: number;
  /** Birth of each path, ascending, s. */
  readonly birthsS: Float64Array;
  /** When the paths are looked at, ascending, s. */
  readonly timesS: readonly number[];
  readonly random: PathRandom;
  readonly meter: Meter;
};

/** Sees the paths of a walk, one path after the other. */
export type PlaneObserver = {
  begin?(path: number, x: number, y: number, bornS: number): void;
  /** One step, with its covariance. Steps follow each other without gaps; they may be shorter than those of `timesS`. */
  step?(fromX: number, fromY: number, fromS: number, x: number, y: number, toS: number, figures: Float64Array): void;
  /** Where a path stands at timesS[k]. */
  seen?(k: number, x: number, y: number, bornS: number): void;
  /** A path ends: carried onto land by the current, or out through an opening of the water. */
  ended?(x: number, y: number, atS: number, how: 'ashore' | 'left'): void;
};

/** Near a shore a step is halved until the room left is this share of its reach, but not below this share of the way between two times. */
const ROOM_SHARE = 0.5;
const LEAST_PART = 1 / 4;

/**
 * Walks paths by Wiener steps with drift, X += u dt + L xi with L L^T the covariance of the step (Cholesky), mirrored at
 * shores. Where the current itself runs onto land the path ends: the current is not known to turn there.
 */
export function walkPlane(input: PlaneWalkInput, observers: readonly PlaneObserver[]): void {
  const walker = new PlaneWalker(input, observers);
  for (let path = 0; path < input.birthsS.length; path++) walker.walk(path);
}

class PlaneWalker {
  private readonly at = new Float64Array(2);
  private readonly figures = new Float64Array(STEP_FIGURES);
  private readonly side: number;
  private bornS = 0;

  constructor(
    private readonly input: PlaneWalkInput,
    private readonly observers: readonly PlaneObserver[],
  ) {
    this.side = Math.sign(this.across(input.x, input.y)) || 1;
  }

  walk(path: number): void {
    const { birthsS, timesS, random, meter, startVarianceM2 } = this.input;
    random.start(path);
    this.bornS = birthsS[path]!;
    this.at[0] = this.input.x;
    this.at[1] = this.input.y;
    const first = Math.sqrt(startVarianceM2);
    this.spread(first * random.normal(), first * random.normal());
    for (const observer of this.observers) observer.begin?.(path, this.at[0]!, this.at[1]!, this.bornS);
    let nowS = this.bornS;
    let steps = 0;
    for (let k = 0; k < timesS.length; k++) {
      if (timesS[k]! < nowS) continue;
      const leastS = (timesS[k]! - nowS) * LEAST_PART;
      while (nowS < timesS[k]!) {
        const toS = this.stepFrom(nowS, timesS[k]!, leastS);
        steps++;
        if (toS === null) {
          meter.count(steps);
          return;
        }
        nowS = toS;
      }
      for (const observer of this.observers) observer.seen?.(k, this.at[0]!, this.at[1]!, this.bornS);
    }
    meter.count(steps);
  }

  /** Takes one step toward `goalS`, shorter near a shore; gives its end, or null where the path ends. */
  private stepFrom(fromS: number, goalS: number, leastS: number): number | null {
    const { motion, walls, random } = this.input;
    const { figures, at } = this;
    let toS = Math.min(goalS, fromS + motion.longestStepS);
    // No crumb is left over for a step of its own.
    if (goalS - toS < leastS) toS = goalS;
    motion.step(at[0]!, at[1]!, this.bornS, fromS, toS, figures);
    if (walls) {
      const room = walls.clearanceM(at[0]!, at[1]!);
      while (toS - fromS > 2 * leastS && this.reach() * ROOM_SHARE > room) {
        toS = fromS + 0.5 * (toS - fromS);
        motion.step(at[0]!, at[1]!, this.bornS, fromS, toS, figures);
      }
    }
    const [fromX, fromY] = [at[0]!, at[1]!];
    if (motion.endsAtShore && walls) {
      const hit = walls.firstHit(fromX, fromY, figures[0]!, figures[1]!);
      if (hit <= 1) {
        // Just short of the shore, so that it is drawn in the water.
        const share = Math.max(0, hit - 1e-6);
        for (const observer of this.observers) observer.ended?.(fromX + share * figures[0]!, fromY + share * figures[1]!, fromS + hit * (toS - fromS), 'ashore');
        return null;
      }
      at[0] = fromX + figures[0]!;
      at[1] = fromY + figures[1]!;
      this.spreadByCovariance(random);
    } else {
      const left = this.spreadByCovariance(random, figures[0]!, figures[1]!);
      if (left !== null) {
        for (const observer of this.observers) observer.ended?.(at[0]!, at[1]!, fromS + left * (toS - fromS), 'left');
        return null;
      }
    }
    for (const observer of this.observers) observer.step?.(fromX, fromY, fromS, at[0]!, at[1]!, toS, figures);
    return toS;
  }

  /** Room a step asks for: its drift and three standard deviations. */
  private reach(): number {
    const { figures } = this;
    return Math.sqrt(figures[0]! * figures[0]! + figures[1]! * figures[1]!) + 3 * Math.sqrt(figures[2]! + figures[4]!);
  }

  /** Gives the share of the step after which the path left through an opening; null where it stays. */
  private spreadByCovariance(random: PathRandom, dx = 0, dy = 0): number | null {
    const { figures } = this;
    const xx = Math.sqrt(Math.max(0, figures[2]!));
    const xy = xx > 0 ? figures[3]! / xx : 0;
    const yy = Math.sqrt(Math.max(0, figures[4]! - xy * xy));
    const first = random.normal();
    const [stepX, stepY] = [dx + xx * first, dy + xy * first + yy * random.normal()];
    const { walls, motion } = this.input;
    if (walls && motion.leavesAt) {
      const [x, y] = [this.at[0]!, this.at[1]!];
      const hit = walls.firstHit(x, y, stepX, stepY);
      if (hit <= 1 && motion.leavesAt(x + hit * stepX, y + hit * stepY)) return hit;
    }
    this.spread(stepX, stepY);
    return null;
  }

  private spread(dx: number, dy: number): void {
    const { walls, line } = this.input;
    const [fromX, fromY] = [this.at[0]!, this.at[1]!];
    let [stepX, stepY] = [dx, dy];
    if (line) {
      const beyond = this.across(fromX + dx, fromY + dy) * this.side;
      if (beyond < 0) {
        stepX += 2 * beyond * this.side * line.ey;
        stepY -= 2 * beyond * this.side * line.ex;
      }
    }
    if (walls) walls.reflect(this.at, stepX, stepY);
    else {
      this.at[0] = fromX + stepX;
      this.at[1] = fromY + stepY;
    }
    // A bounce between the straight shore and the outline may end beyond the line: the path then stays.
    if (line && walls && this.across(this.at[0]!, this.at[1]!) * this.side < 0) {
      this.at[0] = fromX;
      this.at[1] = fromY;
    }
  }

  /** Distance to the left of the straight shore, m; 1 where there is none. */
  private across(x: number, y: number): number {
    const { line } = this.input;
    return line ? (x - line.x) * -line.ey + (y - line.y) * line.ex : 1;
  }
}
