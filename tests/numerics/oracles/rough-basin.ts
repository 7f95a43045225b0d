/**
 * An invented basin: about three quarters water with a rough shore and islands, and a flow without divergence from a
 * stream function that is constant on land. `isOpen`: water also passes through the left and right ends.
 * Faces as shares of a cell in one step: x (nx+1)*ny, y nx*(ny+1).
 */
export function roughBasin(nx: number, ny: number, isOpen: boolean) {
  const isWater = new Uint8Array(nx * ny);
  const landAt = (x: number, y: number): number =>
    Math.sin(9 * x + 2 * Math.sin(7 * y)) * Math.sin(8 * y + 3 * Math.sin(5 * x)) + 0.45 * Math.sin(31 * x + 17 * y) * Math.sin(23 * y - 9 * x);
  for (let j = 0; j < ny; j++) {
    for (let i = 0; i < nx; i++) {
      const [x, y] = [(i + 0.5) / nx, (j + 0.5) / ny];
      const isShore = ny > 4 && (y < 0.04 + 0.05 * Math.sin(13 * x) ** 2 || y > 0.96 - 0.05 * Math.sin(11 * x) ** 2);
      if (!isShore && landAt(x, y) < 0.38) isWater[j * nx + i] = 1;
    }
  }
  // Stream function at the corners, (nx+1)*(ny+1): eddies that vanish beside land and outside, and a through flow.
  const psi = new Float64Array((nx + 1) * (ny + 1));
  const wet = (i: number, j: number): boolean => i >= 0 && i < nx && j >= 0 && j < ny && isWater[j * nx + i] === 1;
  for (let j = 0; j <= ny; j++) {
    for (let i = 0; i <= nx; i++) {
      const neighbours = [wet(i - 1, j - 1), wet(i, j - 1), wet(i - 1, j), wet(i, j)];
      const isInner = neighbours.every(Boolean) || (isOpen && (i === 0 || i === nx) && neighbours.filter(Boolean).length === 2);
      if (isInner) psi[j * (nx + 1) + i] = Math.sin((6.3 * i) / nx + 0.4) * Math.sin((4.1 * j) / ny + 0.2) + 0.8 * Math.sin((11 * i) / nx) * Math.cos((9 * j) / ny) + (isOpen ? 0.6 : 0);
    }
  }
  const flowX = new Float64Array((nx + 1) * ny);
  const flowY = new Float64Array(nx * (ny + 1));
  for (let j = 0; j < ny; j++) for (let i = 0; i <= nx; i++) flowX[j * (nx + 1) + i] = psi[(j + 1) * (nx + 1) + i]! - psi[j * (nx + 1) + i]!;
  for (let j = 0; j <= ny; j++) for (let i = 0; i < nx; i++) flowY[j * nx + i] = psi[j * (nx + 1) + i]! - psi[j * (nx + 1) + i + 1]!;
  let most = 0;
  for (let j = 0; j < ny; j++) {
    for (let i = 0; i < nx; i++) {
      const out = Math.max(0, flowX[j * (nx + 1) + i + 1]!) - Math.min(0, flowX[j * (nx + 1) + i]!) + Math.max(0, flowY[(j + 1) * nx + i]!) - Math.min(0, flowY[j * nx + i]!);
      most = Math.max(most, out);
    }
  }
  for (const flow of [flowX, flowY]) for (let k = 0; k < flow.length; k++) flow[k]! *= 0.45 / (most || 1);
  const diffusionX = new Float64Array((nx + 1) * ny).map((_, k) => 0.25 + 0.1 * Math.sin(k * 0.13));
  const diffusionY = new Float64Array(nx * (ny + 1)).map((_, k) => 0.15 + 0.05 * Math.sin(k * 0.21));
  return { nx, ny, isWater, flowX, flowY, diffusionX, diffusionY };
}
