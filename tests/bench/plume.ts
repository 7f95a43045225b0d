/** An invented plume: puffs along a meandering track that grow and end at a coast and round islands; frame 0 to 47. */
export function plumeFrame(n: number, frame: number): Float64Array {
  const out = new Float64Array(n * n);
  const age = (frame + 1) / 48;
  const puffs = Array.from({ length: 90 }, (_, k) => {
    const t = (k / 89) * age;
    return { x: 0.1 + 0.75 * t, y: 0.5 + 0.22 * Math.sin(7 * t + age), s: 0.008 + 0.055 * t };
  });
  for (let j = 0; j < n; j++) {
    for (let i = 0; i < n; i++) {
      const [x, y] = [(i + 0.5) / n, (j + 0.5) / n];
      const isLand = Math.sin(9 * x + 2 * Math.sin(7 * y)) * Math.sin(8 * y + 3 * Math.sin(5 * x)) > 0.72;
      if (isLand) continue;
      let sum = 0;
      for (const puff of puffs) {
        const r2 = ((x - puff.x) ** 2 + (y - puff.y) ** 2) / (puff.s * puff.s);
        if (r2 < 32) sum += Math.exp(-r2 / 2) / (puff.s * puff.s);
      }
      out[j * n + i] = sum;
    }
  }
  return out;
}

/** The six levels drawn, as shares of the peak. */
export const LEVEL_SHARES = [0.001, 0.003, 0.01, 0.03, 0.1, 0.3];
