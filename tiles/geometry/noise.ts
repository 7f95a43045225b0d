/** Seeded generator (mulberry32): the same seed gives the same landscape on every machine. Values in [0, 1). */
export function seededRandom(seed: number): () => number {
  let state = seed >>> 0;
  return () => {
    state = (state + 0x6d2b79f5) >>> 0;
    let t = state;
    t = Math.imul(t ^ (t >>> 15), t | 1);
    t ^= t + Math.imul(t ^ (t >>> 7), t | 61);
    return ((t ^ (t >>> 14)) >>> 0) / 4_294_967_296;
  };
}

const hash = (x: number, y: number, seed: number): number => {
  let h = Math.imul(x, 374_761_393) ^ Math.imul(y, 668_265_263) ^ Math.imul(seed, 2_147_483_647);
  h = Math.imul(h ^ (h >>> 13), 1_274_126_177);
  return ((h ^ (h >>> 16)) >>> 0) / 4_294_967_296;
};
const ease = (t: number) => t * t * t * (t * (t * 6 - 15) + 10);

/** Smooth value noise in the plane, [0, 1], one feature per unit length. */
export function noise2(x: number, y: number, seed: number): number {
  const ix = Math.floor(x);
  const iy = Math.floor(y);
  const u = ease(x - ix);
  const v = ease(y - iy);
  const top = hash(ix, iy, seed) * (1 - u) + hash(ix + 1, iy, seed) * u;
  const bottom = hash(ix, iy + 1, seed) * (1 - u) + hash(ix + 1, iy + 1, seed) * u;
  return top * (1 - v) + bottom * v;
}

/** Sum of `octaves` of value noise, each half as strong and twice as fine, scaled to [0, 1]. */
export function fractalNoise(x: number, y: number, octaves: number, seed: number): number {
  let sum = 0;
  let weight = 0.5;
  let total = 0;
  for (let i = 0; i < octaves; i++) {
    sum += weight * noise2(x * 2 ** i, y * 2 ** i, seed + i * 101);
    total += weight;
    weight /= 2;
  }
  return sum / total;
}
