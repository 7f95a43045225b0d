/** One step of the channel the plain way, on arrays of arrays [cell][tube]; dispersion solved afresh tube by tube. */
export function plainChannelStep(c: number[][], inflow: readonly number[], faces: ArrayLike<number>, shares: readonly (readonly number[])[], survival: number): { c: number[][]; outflow: number[] } {
  const cells = c.length;
  const tubes = inflow.length;
  const moved = [[...inflow], ...c.slice(0, -1).map((row) => [...row])];
  const spread = moved.map((row) => [...row]);
  for (let k = 0; k < tubes; k++) {
    const pivot: number[] = [];
    const rest: number[] = [];
    const number = (i: number): number => (i > 0 && i < cells ? faces[i]! : 0);
    for (let i = 0; i < cells; i++) {
      pivot[i] = 1 + number(i) + number(i + 1) - (i > 0 ? number(i) ** 2 / pivot[i - 1]! : 0);
      rest[i] = moved[i]![k]! + (i > 0 ? (number(i) / pivot[i - 1]!) * rest[i - 1]! : 0);
    }
    for (let i = cells - 1; i >= 0; i--) spread[i]![k] = (rest[i]! + (i + 1 < cells ? number(i + 1) * spread[i + 1]![k]! : 0)) / pivot[i]!;
  }
  const out = spread.map((row, i) =>
    row.map((value, k) => {
      const right = k + 1 < tubes ? shares[i]![k]! * (row[k + 1]! - value) : 0;
      const left = k > 0 ? shares[i]![k - 1]! * (value - row[k - 1]!) : 0;
      return survival * (value + right - left);
    }),
  );
  return { c: out, outflow: [...c.at(-1)!] };
}
