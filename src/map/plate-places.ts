import type { PixelBox } from './mercator';

export type Push = { x: number; y: number };

/** Plates may touch this much before one gives way, px: their corners are mostly empty. */
const TOUCH_PX = 3;
const STEP_PX = 6;
const FARTHEST_PX = 72;
const DIRECTIONS = 12;

export const overlapsBy = (a: PixelBox, b: PixelBox, px: number): boolean => a.left + px < b.right && a.right - px > b.left && a.top + px < b.bottom && a.bottom - px > b.top;
export const movedBox = (box: PixelBox, { x, y }: Push): PixelBox => ({ left: box.left + x, right: box.right + x, top: box.top + y, bottom: box.bottom + y });

/** Where a plate is tried: its own place, then rings round it, straight above first. */
function* tries(): Generator<Push> {
  yield { x: 0, y: 0 };
  for (let far = STEP_PX; far <= FARTHEST_PX; far += STEP_PX)
    for (let k = 0; k < DIRECTIONS; k++) {
      const turn = (k % 2 === 0 ? k / 2 : -(k + 1) / 2) * ((2 * Math.PI) / DIRECTIONS);
      yield { x: Math.round(far * Math.sin(turn)), y: Math.round(-far * Math.cos(turn)) };
    }
}

/** Moves plates apart, most important first, so that each can be read and pressed; what is in `fixed` stays. */
export function spreadPlates(plates: readonly PixelBox[], fixed: readonly PixelBox[]): Push[] {
  const taken = [...fixed];
  return plates.map((plate) => {
    for (const push of tries()) {
      const box = movedBox(plate, push);
      if (taken.some((other) => overlapsBy(box, other, TOUCH_PX))) continue;
      taken.push(box);
      return push;
    }
    taken.push(plate);
    return { x: 0, y: 0 };
  });
}
