import type { PlaneArea } from '../open/area-mask';

/** Place on the outer outline, as length along it from its first position, m. */
export function alongOutline(area: PlaneArea, xM: number, yM: number): { alongM: number; distanceM: number } {
  const ring = area.rings[0]!;
  let walked = 0;
  let best = { alongM: 0, distanceM: Infinity };
  for (let i = 0; i + 3 < ring.length; i += 2) {
    const dx = ring[i + 2]! - ring[i]!;
    const dy = ring[i + 3]! - ring[i + 1]!;
    const length = Math.hypot(dx, dy);
    const z = length === 0 ? 0 : Math.min(1, Math.max(0, ((xM - ring[i]!) * dx + (yM - ring[i + 1]!) * dy) / (length * length)));
    const distanceM = Math.hypot(xM - ring[i]! - z * dx, yM - ring[i + 1]! - z * dy);
    if (distanceM < best.distanceM) best = { alongM: walked + z * length, distanceM };
    walked += length;
  }
  return best;
}

export function outlineLength(area: PlaneArea): number {
  const ring = area.rings[0]!;
  let walked = 0;
  for (let i = 0; i + 3 < ring.length; i += 2) walked += Math.hypot(ring[i + 2]! - ring[i]!, ring[i + 3]! - ring[i + 1]!);
  return walked;
}

/** A stretch of the outline between two places on it, the shorter or the longer way round. */
export function outlineStretch(fromM: number, toM: number, wholeM: number, way: 'shorter' | 'longer'): (alongM: number) => boolean {
  const [low, high] = fromM <= toM ? [fromM, toM] : [toM, fromM];
  const isInnerShorter = high - low <= wholeM / 2;
  const takesInner = isInnerShorter === (way === 'shorter');
  return (alongM) => (alongM >= low && alongM <= high) === takesInner;
}
