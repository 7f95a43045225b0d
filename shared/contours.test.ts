import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { contourBands, contourRings, contourRoom, fillRoom, ringsArea, runsAlongBorder } from './contours';

function ringsOf(nx: number, ny: number, value: (x: number, y: number) => number, level: number) {
  const room = contourRoom(nx, ny);
  fillRoom(room, Float64Array.from({ length: nx * ny }, (_, k) => value(k % nx, Math.floor(k / nx))));
  return contourRings(room, level);
}

describe('contour rings', () => {
  // Two errors of order 2, each summed round a circle of radius R in grid units. A parabola replaced by its chord moves a
  // crossing by at most 1/(8 R): 2 pi R / (8 R) = 0.8. An arc replaced by chords of length L <= 1.41 loses L^3/(12 R)
  // each: 2 pi L^2 / 12 = 1.05. Together below 2 cells; an ellipse is a stretched circle and may lose more by its axis ratio.
  it('enclose the area of the ellipse that a Gaussian cloud has at a level, in logarithms', () => {
    for (const [a, b, drop] of [[12, 12, 1], [30, 9, 0.8], [7, 21, 1.5]] as const) {
      const rings = ringsOf(161, 161, (x, y) => -(((x - 80.3) / a) ** 2) - ((y - 79.6) / b) ** 2, -drop);
      expect(rings.ends).toHaveLength(1);
      expect(Math.abs(ringsArea(rings) - Math.PI * a * b * drop)).toBeLessThan((2 * Math.max(a, b)) / Math.min(a, b));
    }
  });

  it('close in on the true area with the square of the spacing', () => {
    const error = (n: number) => {
      const h = 8 / (n - 1);
      const rings = ringsOf(n, n, (i, j) => -((i * h - 4) ** 2) - ((j * h - 4) ** 2), -1);
      return Math.abs(ringsArea(rings) * h * h - Math.PI);
    };
    expect(error(81) / error(161)).toBeGreaterThan(3);
  });

  it('leave holes out', () => {
    // A ring-shaped cloud: radius 20 at its ridge, its value falls by 1 at 5 from the ridge.
    const rings = ringsOf(81, 81, (x, y) => -(((Math.hypot(x - 40, y - 40) - 20) / 5) ** 2), -1);
    expect(rings.ends).toHaveLength(2);
    // Chords of circles 25 and 15 with steps of at most 1.4: both areas lose less than 2 pi r (1.4^2 / 12 r) = 1.03; and as much again for the crossings.
    expect(Math.abs(ringsArea(rings) - Math.PI * (25 ** 2 - 15 ** 2))).toBeLessThan(4);
  });

  it('run along the border of the grid where the cloud is cut off', () => {
    const rings = ringsOf(5, 4, () => 1, 0);
    expect(rings.ends).toHaveLength(1);
    expect(ringsArea(rings)).toBe(12);
    for (let k = 0; k < rings.ends[0]!; k++) {
      const l = (k + 1) % rings.ends[0]!;
      const [ax, ay, bx, by] = [rings.points[2 * k]!, rings.points[2 * k + 1]!, rings.points[2 * l]!, rings.points[2 * l + 1]!];
      expect(runsAlongBorder(5, 4, ax, ay, bx, by) || (ax === bx && ay === by)).toBe(true);
    }
  });

  it('join or part a saddle by the mean of its corners', () => {
    const corners = (low: number) => ringsOf(2, 2, (x, y) => (x === y ? 1 : low), 0).ends.length;
    expect(corners(-0.5)).toBe(1);
    expect(corners(-1.5)).toBe(2);
  });

  it('enclose nothing when all values are below the level', () => {
    expect(ringsOf(6, 6, () => 0, 0.5).ends).toEqual([]);
  });

  it('never enclose more at a higher level, and leave the room clean for the next call', () => {
    fc.assert(
      fc.property(fc.array(fc.integer({ min: 0, max: 9 }), { minLength: 36, maxLength: 36 }), fc.integer({ min: 1, max: 8 }), (values, level) => {
        const room = contourRoom(6, 6);
        fillRoom(room, values);
        const low = ringsArea(contourRings(room, level - 0.5));
        const high = ringsArea(contourRings(room, level + 0.5));
        expect(low).toBeGreaterThanOrEqual(high - 1e-9);
        expect(high).toBeGreaterThanOrEqual(-1e-9);
        expect(room.next.every((edge) => edge === -1)).toBe(true);
      }),
    );
  });

  it('are the same for all levels at once as for each by itself, whatever kind of array holds the values', () => {
    fc.assert(
      fc.property(fc.integer({ min: 1, max: 9 }), fc.integer({ min: 1, max: 9 }), fc.array(fc.integer({ min: 0, max: 9 }), { minLength: 81, maxLength: 81 }), (nx, ny, all) => {
        const values = all.slice(0, nx * ny);
        const levels = [1, 3, 3, 6.5, 9];
        const room = contourRoom(nx, ny);
        const bands = [values, Uint16Array.from(values), Float64Array.from(values)].map((array) => contourBands(room, array, levels));
        fillRoom(room, values);
        levels.forEach((level, k) => {
          const alone = contourRings(room, level);
          for (const band of bands) expect(band[k]).toEqual(alone);
        });
      }),
    );
  });

  it('count as many cells as a plain look at every node, whatever the level', () => {
    // Between a node above and one below there is exactly one crossing: rings have one vertex for each such pair, border included.
    fc.assert(
      fc.property(fc.array(fc.integer({ min: 0, max: 9 }), { minLength: 35, maxLength: 35 }), fc.integer({ min: 1, max: 8 }), (values, level) => {
        const room = contourRoom(7, 5);
        const isHigh = (i: number, j: number) => i >= 0 && i < 7 && j >= 0 && j < 5 && values[j * 7 + i]! >= level;
        let pairs = 0;
        for (let j = -1; j < 5; j++) for (let i = -1; i < 7; i++) pairs += Number(isHigh(i, j) !== isHigh(i + 1, j)) + Number(isHigh(i, j) !== isHigh(i, j + 1));
        expect(contourBands(room, values, [level])[0]!.points.length / 2).toBe(pairs);
      }),
    );
  });

  it('take values that are no number as below every level', () => {
    const values = [1, Number.NaN, 1, 1, 1, 1, 1, 1, 1];
    const [rings] = contourBands(contourRoom(3, 3), values, [0.5]);
    expect([...rings!.points].every(Number.isFinite)).toBe(true);
    // The notch reaches to the nodes beside it and below it.
    expect(ringsArea(rings!)).toBe(3);
  });

  it('refuse a grid without nodes, values that do not fill it and levels out of order', () => {
    expect(() => contourRoom(0, 3)).toThrow(/needs nodes/);
    expect(() => fillRoom(contourRoom(2, 3), [1, 2])).toThrow(/has 6 values, got 2/);
    expect(() => contourBands(contourRoom(1, 1), [1], [2, 1])).toThrow(/must ascend/);
  });
});
