import * as d from '../district-points';
import { cumulative, joinSpans, leftNormals, meanderSpans, roughenSpan, smoothSpans, thinIndices, toXy, type Meander, type Xy } from '../geometry/curves';
import { noise2 } from '../geometry/noise';

/** A vertex of a river's centreline: x, y in metres and chainage in km. */
export type RiverVertex = [x: number, y: number, km: number];

/**
 * Draws a winding centreline through points of known chainage. Between two of them chainage grows in proportion
 * to distance along the curve, so every given point keeps exactly its chainage.
 */
export function riverCurve(points: readonly d.ChainagePoint[], meander: Meander, stepM = 20): RiverVertex[] {
  const spans = meanderSpans(smoothSpans(points.map(toXy), stepM), meander);
  return spans.flatMap((span, i) => {
    const from = points[i]![2];
    const to = points[i + 1]![2];
    const along = cumulative(span);
    const length = along[along.length - 1]!;
    const vertices = span.map(([x, y], k): RiverVertex => [x, y, k === span.length - 1 ? to : from + ((to - from) * along[k]!) / length]);
    return i === 0 ? vertices : vertices.slice(1);
  });
}

/** The part between two chainages that are vertices, thinned to fewer than `most` vertices; given chainages stay. */
export function thinReach(curve: readonly RiverVertex[], topKm: number, bottomKm: number, keptKm: readonly number[], most = 200): RiverVertex[] {
  const part = curve.filter(([, , km]) => km <= topKm && km >= bottomKm);
  for (let toleranceM = 1.5; ; toleranceM *= 1.2) {
    const cuts = part.flatMap(([, , km], i) => (keptKm.includes(km) || i === 0 || i === part.length - 1 ? [i] : []));
    const kept = cuts.slice(1).flatMap((end, k) => {
      const start = cuts[k]!;
      const indices = thinIndices(part.slice(start, end + 1).map(([x, y]): Xy => [x, y]), toleranceM).map((i) => start + i);
      return k === 0 ? indices : indices.slice(1);
    });
    if (kept.length < most) return kept.map((i) => part[i]!);
  }
}

export const ollemarCurve = (): RiverVertex[] => {
  const upper = riverCurve(d.ollemar.filter(([, , km]) => km >= 14), { amplitudeM: 130, wavelengthM: 1_500, seed: 11 });
  const lower = riverCurve(d.ollemar.filter(([, , km]) => km <= 14), { amplitudeM: 90, wavelengthM: 3_200, seed: 12 });
  return [...upper, ...lower.slice(1)];
};
export const quillockCurve = (): RiverVertex[] => riverCurve(d.quillock, { amplitudeM: 70, wavelengthM: 780, seed: 13 });
export const evarrowCurve = (): RiverVertex[] => riverCurve(d.evarrow, { amplitudeM: 85, wavelengthM: 950, seed: 14 });

/** Width of the estuary at a chainage, m, straight between the listed widths. */
export function estuaryWidthM(km: number): number {
  const rows = d.estuaryWidths;
  for (let i = 1; i < rows.length; i++) {
    const [k0, w0] = rows[i - 1]!;
    const [k1, w1] = rows[i]!;
    if (km <= k1) return w0 + ((w1 - w0) * Math.max(0, km - k0)) / (k1 - k0);
  }
  return rows[rows.length - 1]![1];
}

/** Both banks from km 14 down to the bar; the ends are pinned to the North Mole and Ferrow Spit. `share` of the half width. */
function banks(curve: readonly RiverVertex[], share: number, wobble: number): { left: Xy[]; right: Xy[] } {
  const part = curve.filter(([, , km]) => km <= 14.01);
  const line = part.map(([x, y]): Xy => [x, y]);
  const spread = 14;
  const normals = leftNormals(line).map((_, i, all): Xy => {
    let [x, y] = [0, 0];
    for (let k = -spread; k <= spread; k++) {
      const n = all[Math.min(all.length - 1, Math.max(0, i + k))]!;
      x += n[0];
      y += n[1];
    }
    const length = Math.hypot(x, y);
    return [x / length, y / length];
  });
  const bank = (side: 1 | -1): Xy[] =>
    line.map((point, i) => {
      const km = part[i]![2];
      const fade = Math.min(1, km / 0.6, (14 - km) / 1.5 + 0.02);
      const fine = share < 1 ? 0 : 0.6 * (noise2(km / 0.27, side * 5, 32) - 0.5) + 0.3 * (noise2(km / 0.08, side * 5, 33) - 0.5);
      const rough = noise2(km / 0.9, side * 5, 31) - 0.5 + fine;
      const half = (estuaryWidthM(km) / 2) * (share + wobble * Math.max(0, fade) * rough);
      return [point[0] + side * normals[i]![0] * half, point[1] + side * normals[i]![1] * half];
    });
  return { left: bank(1), right: bank(-1) };
}

const pinEnd = (bank: Xy[], curve: readonly RiverVertex[], pin: Xy): Xy[] => {
  const kms = curve.filter(([, , km]) => km <= 14.01).map(([, , km]) => km);
  const end = bank[bank.length - 1]!;
  return bank.map(([x, y], i) => {
    const pull = Math.max(0, 1 - kms[i]! / 0.9) ** 2;
    return [x + pull * (pin[0] - end[0]), y + pull * (pin[1] - end[1])];
  });
};

/** The tidal water from Low Weir to the bar as a ring, and its deeper channel, which runs on into the bay. */
export function estuaryRings(curve: readonly RiverVertex[]): { water: Xy[]; channel: Xy[]; banks: Xy[][] } {
  const outer = banks(curve, 1, 0.12);
  const left = pinEnd(outer.left, curve, toXy(d.ferrowSpit));
  const right = pinEnd(outer.right, curve, toXy(d.coastNorthOfRiver[d.coastNorthOfRiver.length - 1]!.to));
  const inner = banks(curve, 0.6, 0.42);
  const [ex, ey] = [inner.left[inner.left.length - 1]!, inner.right[inner.right.length - 1]!];
  const runOut: Xy[] = [[ex[0] - 1_100, ex[1] + 60], [ex[0] - 2_300, ex[1] - 150], [ey[0] - 2_300, ey[1] + 650], [ey[0] - 1_100, ey[1] + 240]];
  return { banks: [left, right], water: [...left, ...[...right].reverse()], channel: [...inner.left, ...runOut, ...[...inner.right].reverse()] };
}

/** Inner basin and the gap that joins it to the river, turned with the bank. */
export function harbourRings(): { basin: Xy[]; gap: Xy[] } {
  const [cx, cy] = toXy(d.harbour.centre);
  const turn = (-6 * Math.PI) / 180;
  const corner = (sx: number, sy: number): Xy => {
    const x = (sx * d.harbour.lengthM) / 2;
    const y = (sy * d.harbour.widthM) / 2;
    return [cx + x * Math.cos(turn) - y * Math.sin(turn), cy + x * Math.sin(turn) + y * Math.cos(turn)];
  };
  const [gx, gy] = toXy(d.harbour.gap);
  const half = d.harbour.gapWidthM / 2;
  return {
    basin: [corner(-1, -1), corner(1, -1), corner(1, 1), corner(-1, 1)],
    gap: [[gx - half, gy + 190], [gx + half, gy + 190], [gx + half, gy - 170], [gx - half, gy - 170]],
  };
}

/** Shore through its fixed points, smooth in the large and rugged in the small. */
export function shore(start: d.Point, legs: readonly d.ShoreLeg[], seed: number, largestM: number, isClosed = false): Xy[] {
  const points = [start, ...legs.map((leg) => leg.to)].map(toXy);
  const spans = smoothSpans(isClosed ? points.slice(0, -1) : points, 25, isClosed);
  return joinSpans(spans.map((span, i) => roughenSpan(span, legs[i]!.roughness, largestM, seed)));
}

export type Coast = { ring: Xy[]; northShore: Xy[]; southShore: Xy[] };
/** The island's outline, closed across the river mouth. */
export function islandCoast(): Coast {
  const northShore = shore(d.westCoastStart, d.coastNorthOfRiver, 21, 1_400);
  const southShore = shore(d.ferrowSpit, d.coastSouthOfRiver, 22, 1_400);
  const last = d.coastSouthOfRiver[d.coastSouthOfRiver.length - 1]!.to;
  const rest = shore(last, d.coastRoundTheIsland, 23, 4_000);
  return { ring: [...northShore, ...southShore, ...rest.slice(1)], northShore, southShore };
}

export const lakeRing = (): Xy[] => shore(d.lakeDam, d.lakeShore, 24, 420, true);

export const marshOutline = (): Xy[] =>
  joinSpans(smoothSpans(d.marshRing.map(toXy), 30, true).map((span) => roughenSpan(span, 0.8, 420, 25)));

/** Small streams; each ends on the river it runs to where one lies near. */
export function streamLines(rivers: readonly Xy[][]): { name: string; line: Xy[] }[] {
  return d.streams.map(({ name, through }, i) => {
    const points = through.map(toXy);
    const end = points[points.length - 1]!;
    let nearest: Xy = end;
    let nearestM = 900;
    for (const [x, y] of rivers.flat()) {
      const away = Math.hypot(x - end[0], y - end[1]);
      if (away < nearestM) [nearest, nearestM] = [[x, y], away];
    }
    points[points.length - 1] = nearest;
    return { name, line: joinSpans(meanderSpans(smoothSpans(points, 30), { amplitudeM: 90, wavelengthM: 850, seed: 40 + i })) };
  });
}
