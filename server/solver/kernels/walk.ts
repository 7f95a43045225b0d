import { instantiate, Layout, type CompiledKernel } from './host';

type WalkCalls = { walk(x: number, y: number, count: number, parameters: number, steps: number, lengthX: number, lengthY: number, state: number): void };

/** Paths that take all their steps together, so that they stay in the first-level cache. Part of the result's definition: every block has its own generators. */
const BLOCK = 2048;
const STATE_WORDS = 32;
/** Steps handed over at a time. */
const STEPS_AT_ONCE = 256;

/** What one step does: x += driftX + spreadX N, y likewise, in metres; spread = sqrt(2 K dt). */
export type WalkStep = { driftX: number; driftY: number; spreadX: number; spreadY: number };

/**
 * Word `index` of the generators of a block: three numbers hashed to one, so that any block can be made without the ones
 * before it. Source: the finaliser of Steele, Lea & Flood 2014, Fast splittable pseudorandom number generators, for 32 bits.
 */
function seedWord(seed: number, block: number, index: number): number {
  let word = 0;
  for (const part of [seed, block, index]) {
    word = (word + Math.imul(part, 0x9e3779b9) + 0x7f4a7c15) | 0;
    word = Math.imul(word ^ (word >>> 16), 0x21f0aaad);
    word = Math.imul(word ^ (word >>> 15), 0x735a2d97);
    word ^= word >>> 15;
  }
  return word;
}

/**
 * Random paths in a box with mirrors for walls: dX = u dt + sqrt(2 K dt) N, exact for uniform u and K whatever the step;
 * a step must be shorter than the box, which holds for drift + 6.6 spread below its sides (checked).
 * Normals by Box & Muller 1958 from xoshiro128+ (Blackman & Vigna 2021, ACM Trans. Math. Softw. 47:36), cut at 6.56 standard
 * deviations by 31-bit uniforms. Positions in 32 bits: 6e-8 of the box. Same seed, same bytes: path n does not depend on
 * how many others there are, nor on how the steps are split over calls.
 * Cost: about 3 ns a path and step. Memory: 8 bytes a path, made here.
 */
export class BoxWalk {
  /** Positions, m, one a path; read and written freely between calls. */
  readonly x: Float32Array;
  readonly y: Float32Array;
  private readonly calls: WalkCalls;
  private readonly at: { x: number; y: number; state: number; parameters: number };
  private readonly parameters: Float32Array;

  constructor(kernel: CompiledKernel, readonly paths: number, readonly lengthXM: number, readonly lengthYM: number, seed: number) {
    if (!(paths >= 1 && lengthXM > 0 && lengthYM > 0)) throw new RangeError(`A walk needs paths and a box, got ${paths} in ${lengthXM} x ${lengthYM} m`);
    const blocks = Math.ceil(paths / BLOCK);
    // Paths beyond the last are walked too, so that a block always draws alike.
    const padded = blocks * BLOCK;
    const layout = new Layout();
    this.at = { x: layout.f32(padded), y: layout.f32(padded), state: layout.take(4 * STATE_WORDS * blocks), parameters: layout.f32(4 * STEPS_AT_ONCE) };
    const { calls, buffer } = instantiate<WalkCalls>(kernel, layout);
    this.calls = calls;
    this.x = new Float32Array(buffer, this.at.x, paths);
    this.y = new Float32Array(buffer, this.at.y, paths);
    this.parameters = new Float32Array(buffer, this.at.parameters, 4 * STEPS_AT_ONCE);
    const state = new Int32Array(buffer, this.at.state, STATE_WORDS * blocks);
    // A generator whose four words are all 0 would stay there: zeros are replaced.
    for (let k = 0; k < state.length; k++) state[k] = seedWord(seed, Math.floor(k / STATE_WORDS), k % STATE_WORDS) || 1;
  }

  /** All paths take the steps, in order. */
  walk(steps: readonly WalkStep[]): void {
    for (const [k, { driftX, driftY, spreadX, spreadY }] of steps.entries()) {
      const reach = Math.max((Math.abs(driftX) + 6.6 * spreadX) / this.lengthXM, (Math.abs(driftY) + 6.6 * spreadY) / this.lengthYM);
      if (!(reach < 1)) throw new RangeError(`Step ${k} may reach ${reach.toPrecision(3)} of the box; a mirror at each wall serves less than 1: shorten the step`);
    }
    for (let from = 0; from < steps.length; from += STEPS_AT_ONCE) this.walkSome(steps.slice(from, from + STEPS_AT_ONCE));
  }

  private walkSome(steps: readonly WalkStep[]): void {
    const { at, calls, paths } = this;
    steps.forEach(({ driftX, driftY, spreadX, spreadY }, k) => this.parameters.set([driftX, driftY, spreadX, spreadY], 4 * k));
    for (let from = 0, block = 0; from < paths; from += BLOCK, block++) {
      calls.walk(at.x + 4 * from, at.y + 4 * from, BLOCK, at.parameters, steps.length, this.lengthXM, this.lengthYM, at.state + 4 * STATE_WORDS * block);
    }
  }
}
