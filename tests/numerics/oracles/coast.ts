/**
 * An invented bay: water open to the left edge, a rough random coast on the other three sides and a few islands; about three
 * quarters of the square, all of it connected. The coast is a sum of waves with phases from a counter, so it is the same on
 * every machine and at every resolution.
 */
export function bay(n: number): Uint8Array {
  const wave = (t: number, seed: number): number => {
    let sum = 0;
    for (let k = 1; k <= 9; k++) sum += Math.sin(2 * Math.PI * (k * t + ((seed * k * 0.6180339887) % 1))) / k ** 1.1;
    return sum;
  };
  const islands = [[0.35, 0.42, 0.06], [0.62, 0.66, 0.05], [0.7, 0.3, 0.07], [0.18, 0.72, 0.035], [0.48, 0.2, 0.03]] as const;
  const isWater = new Uint8Array(n * n);
  for (let j = 0; j < n; j++) {
    for (let i = 0; i < n; i++) {
      const [x, y] = [(i + 0.5) / n, (j + 0.5) / n];
      const inBay = y > 0.07 + 0.03 * wave(x, 3) && y < 0.93 + 0.03 * wave(x, 7) && x < 0.95 + 0.03 * wave(y, 5);
      const onIsland = islands.some(([a, b, r], k) => Math.hypot(x - a, y - b) < r * (1 + 0.25 * wave(Math.atan2(y - b, x - a) / (2 * Math.PI), 11 + k)));
      if (inBay && !onIsland) isWater[j * n + i] = 1;
    }
  }
  return connected(isWater, n);
}

/** Only what water reaches from the left edge. */
function connected(isWater: Uint8Array, n: number): Uint8Array {
  const reached = new Uint8Array(n * n);
  const stack: number[] = [];
  const visit = (i: number, j: number): void => {
    const at = j * n + i;
    if (i < 0 || i >= n || j < 0 || j >= n || isWater[at] === 0 || reached[at] === 1) return;
    reached[at] = 1;
    stack.push(at);
  };
  for (let j = 0; j < n; j++) visit(0, j);
  while (stack.length > 0) {
    const at = stack.pop()!;
    const [i, j] = [at % n, Math.floor(at / n)];
    visit(i - 1, j);
    visit(i + 1, j);
    visit(i, j - 1);
    visit(i, j + 1);
  }
  return reached;
}

/** Faces of 1 between cells of water, 2 at the open left edge (half the distance); x (n+1)*n, y n*(n+1). */
export function openLeftFaces(isWater: Uint8Array, n: number): { x: Float64Array; y: Float64Array } {
  const wet = (i: number, j: number): boolean => i >= 0 && i < n && j >= 0 && j < n && isWater[j * n + i] === 1;
  const x = new Float64Array((n + 1) * n);
  const y = new Float64Array(n * (n + 1));
  for (let j = 0; j < n; j++) for (let i = 0; i <= n; i++) x[j * (n + 1) + i] = wet(i - 1, j) && wet(i, j) ? 1 : i === 0 && wet(0, j) ? 2 : 0;
  for (let j = 0; j <= n; j++) for (let i = 0; i < n; i++) y[j * n + i] = wet(i, j - 1) && wet(i, j) ? 1 : 0;
  return { x, y };
}
