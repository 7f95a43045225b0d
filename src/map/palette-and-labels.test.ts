import { describe, expect, it } from 'vitest';
import { placeLabels, type Labelled } from './label-places';
import type { PixelBox } from './mercator';
import { bandColours, madder, ochre } from './palette';
import { movedBox, overlapsBy, spreadPlates } from './plate-places';
import { readFileSync } from 'node:fs';

const mark = (left: number, top: number): Labelled => ({ body: { left, top, right: left + 30, bottom: top + 30 }, labelWidth: 50, labelHeight: 16 });

describe('labels of marks', () => {
  it('stand to the right, and give way where another mark stands', () => {
    expect(placeLabels([mark(100, 100)])).toEqual(['right']);
    expect(placeLabels([mark(100, 100), mark(140, 100)])).toEqual(['left', 'right']);
  });

  it('are left out rather than covering one another', () => {
    const crowd = [mark(100, 100), mark(100, 100), mark(100, 100), mark(100, 100), mark(100, 100)];
    const placed = placeLabels(crowd);
    expect(new Set(placed.filter((side) => side !== null)).size).toBe(placed.filter((side) => side !== null).length);
    expect(placed[4]).toBeNull();
  });
});

describe('plates', () => {
  const plate = (left: number): PixelBox => ({ left, top: 100, right: left + 30, bottom: 130 });
  const apart = (boxes: PixelBox[]) => boxes.every((a, i) => boxes.every((b, k) => i === k || !overlapsBy(a, b, 4)));

  it('stay where they belong while there is room', () => {
    expect(spreadPlates([plate(100), plate(140)], [])).toEqual([{ x: 0, y: 0 }, { x: 0, y: 0 }]);
  });

  it('give way to more important ones and to releases until each can be read', () => {
    const plates = [plate(100), plate(104), plate(110), plate(96)];
    const release = plate(120);
    const pushes = spreadPlates(plates, [release]);
    expect(apart([...plates.map((box, k) => movedBox(box, pushes[k]!)), release])).toBe(true);
    for (const { x, y } of pushes) expect(Math.hypot(x, y)).toBeLessThan(73);
  });
});

/** Relative luminance, WCAG 2.2. */
const luminance = (hex: string): number =>
  [1, 3, 5].reduce((sum, at, k) => {
    const c = Number.parseInt(hex.slice(at, at + 2), 16) / 255;
    return sum + [0.2126, 0.7152, 0.0722][k]! * (c <= 0.04045 ? c / 12.92 : ((c + 0.055) / 1.055) ** 2.4);
  }, 0);

describe('bands', () => {
  it('darken from the lowest level up by day and lighten by night, for any number of levels', () => {
    for (const ramp of [madder, ochre])
      for (let count = 2; count <= 12; count++) {
        const day = bandColours(count, 'day', ramp).map(luminance);
        const night = bandColours(count, 'night', ramp).map(luminance);
        for (let k = 1; k < count; k++) {
          expect(day[k]!).toBeLessThan(day[k - 1]!);
          expect(night[k]!).toBeGreaterThan(night[k - 1]!);
        }
      }
  });

  it('are the tokens of the style sheet', () => {
    const css = readFileSync('src/styles/tokens.css', 'utf8');
    expect(css.match(/--madder-\d: (#[0-9a-f]{6})/g)!.slice(0, 7).map((rule) => rule.slice(-7))).toEqual([...madder]);
    expect(css.match(/--ochre-\d: (#[0-9a-f]{6})/g)!.slice(0, 6).map((rule) => rule.slice(-7))).toEqual([...ochre]);
    const bands = readFileSync('src/map/map.css', 'utf8');
    expect(bands).toContain('opacity: 0.7;');
  });
});
