/** One path the plain way: the same generators in whole numbers, Box and Muller's form in 64 bits. `words` are the 32 words of its block. */
export type PlainGenerator = { words: Int32Array };

function next(words: Int32Array, set: number, lane: number): number {
  const at = (word: number): number => 16 * set + 4 * word + lane;
  const [s0, s1, s2, s3] = [words[at(0)]!, words[at(1)]!, words[at(2)]!, words[at(3)]!];
  const result = (s0 + s3) | 0;
  const [t2, t3] = [s2 ^ s0, s3 ^ s1];
  words[at(1)] = s1 ^ t2;
  words[at(0)] = s0 ^ t3;
  words[at(2)] = t2 ^ (s1 << 9);
  words[at(3)] = (t3 << 11) | (t3 >>> 21);
  return result;
}

/** Two normals of one lane. */
export function plainNormals(words: Int32Array, lane: number): [number, number] {
  const forRadius = next(words, 0, lane);
  const forAngle = next(words, 1, lane);
  const radius = Math.sqrt(-2 * Math.log(((forRadius >>> 1) | 1) / 2 ** 31));
  const quarter = ((forAngle & -256) / 2 ** 32) * (Math.PI / 2);
  const side = (forAngle & 16) === 0 ? 1 : -1;
  const [along, across] = [side * radius * Math.cos(quarter), side * radius * Math.sin(quarter)];
  return (forAngle & 32) === 0 ? [along, across] : [across, along];
}
