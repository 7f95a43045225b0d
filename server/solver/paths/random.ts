/**
 * Random numbers of one path. Every path has its own stream, found from (seed, stream, path) alone, so that results do
 * not depend on how many paths are walked, in which order, or in which blocks.
 *
 * Generator: xoshiro128** (Blackman & Vigna 2021, ACM Trans. Math. Softw. 47: 36), period 2^128 - 1. Its state is filled
 * by mixing seed, stream and path with the finaliser of MurmurHash3 (a bijection of 32 bits, so that no two paths of a
 * stream start alike) and stepping by the golden ratio (Steele, Lea & Flood 2014, the splitmix construction).
 * Normals: Box & Muller 1958, Ann. Math. Stat. 29: 610, exact up to the grain of the uniforms: 53 bits for the radius,
 * which reaches 8.5 standard deviations, 32 bits for the angle.
 */
export class PathRandom {
  private a = 1;
  private b = 0;
  private c = 0;
  private d = 0;
  private spare = 0;
  private hasSpare = false;

  constructor(
    private readonly seed: number,
    private readonly stream: number,
  ) {
    this.start(0);
  }

  /** Goes to the beginning of a path's own stream. */
  start(path: number): this {
    let h = mix(mix(mix(this.seed) ^ Math.imul(this.stream + 1, 0x85ebca6b)) + path);
    const next = (): number => mix((h = (h + 0x9e3779b9) | 0));
    this.a = next();
    this.b = next();
    this.c = next();
    // All zeros is the one state that never leaves itself.
    this.d = next() | 1;
    this.hasSpare = false;
    return this;
  }

  /** 32 random bits. */
  bits(): number {
    const scrambled = Math.imul(rotate(Math.imul(this.b, 5), 7), 9) >>> 0;
    const shifted = this.b << 9;
    this.c ^= this.a;
    this.d ^= this.b;
    this.b ^= this.c;
    this.a ^= this.d;
    this.c ^= shifted;
    this.d = rotate(this.d, 11);
    return scrambled;
  }

  /** Uniform on (0, 1], 53 bits. */
  uniform(): number {
    const high = this.bits() >>> 5;
    const low = this.bits() >>> 6;
    return (high * 67_108_864 + low + 1) / 9_007_199_254_740_992;
  }

  /** Normal with mean 0 and variance 1. */
  normal(): number {
    if (this.hasSpare) {
      this.hasSpare = false;
      return this.spare;
    }
    const radius = Math.sqrt(-2 * Math.log(this.uniform()));
    const angle = (2 * Math.PI * this.bits()) / 4_294_967_296;
    this.spare = radius * Math.sin(angle);
    this.hasSpare = true;
    return radius * Math.cos(angle);
  }

  /**
   * Inverse Gaussian with the given mean and shape: the first passage time of a walk with drift.
   * Source: Michael, Schucany & Haas 1976, Am. Stat. 30: 88; the smaller root is written without cancellation.
   */
  inverseGaussian(mean: number, shape: number): number {
    const y = mean * this.normal() ** 2;
    const smaller = (2 * mean * shape) / (y + 2 * shape + Math.sqrt(y * y + 4 * shape * y));
    return this.uniform() <= mean / (mean + smaller) ? smaller : (mean * mean) / smaller;
  }
}

const rotate = (x: number, k: number): number => (x << k) | (x >>> (32 - k));

function mix(x: number): number {
  let h = x | 0;
  h = Math.imul(h ^ (h >>> 16), 0x85ebca6b);
  h = Math.imul(h ^ (h >>> 13), 0xc2b2ae35);
  return h ^ (h >>> 16);
}
