/** Where a moving release is: straight and even between its rows, at rest before the first and after the last. */
export type Track = {
  place(tS: number, out: Float64Array): void;
  /** Fastest stretch, m/s. */
  readonly maxSpeedMps: number;
  readonly knotsS: readonly number[];
};

export function trackOf(rows: readonly { readonly atS: number; readonly x: number; readonly y: number }[]): Track {
  const speeds = rows.slice(1).map((row, i) => Math.hypot(row.x - rows[i]!.x, row.y - rows[i]!.y) / (row.atS - rows[i]!.atS));
  return {
    maxSpeedMps: Math.max(0, ...speeds),
    knotsS: rows.map((row) => row.atS),
    place(tS, out) {
      let i = 0;
      while (i < rows.length - 2 && rows[i + 1]!.atS <= tS) i++;
      const [a, b] = [rows[i]!, rows[Math.min(i + 1, rows.length - 1)]!];
      const z = b.atS > a.atS ? Math.min(1, Math.max(0, (tS - a.atS) / (b.atS - a.atS))) : 0;
      out[0] = a.x + z * (b.x - a.x);
      out[1] = a.y + z * (b.y - a.y);
    },
  };
}
