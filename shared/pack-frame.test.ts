import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { contourBands, contourRoom, ringsArea } from './contours';
import { NO_ESTIMATE } from './frames';
import { packRaster, packRings, unpackRaster, unpackRings } from './pack-frame';

describe('a packed raster', () => {
  it('comes back within half a step, with its blanks and zeros as they were', () => {
    fc.assert(
      fc.property(fc.integer({ min: 1, max: 9 }), fc.integer({ min: 1, max: 9 }), fc.array(fc.oneof(fc.constantFrom(0, 1, 65_534, NO_ESTIMATE), fc.integer({ min: 1, max: 65_534 })), { minLength: 81, maxLength: 81 }), (nx, ny, all) => {
        const codes = Uint16Array.from(all.slice(0, nx * ny));
        unpackRaster(packRaster(codes, nx, ny), nx, ny).forEach((code, k) => {
          if (codes[k] === 0 || codes[k] === NO_ESTIMATE) expect(code).toBe(codes[k]);
          // 65 533 steps in 253: half of one is 129.5, and one for rounding.
          else expect(Math.abs(code - codes[k]!)).toBeLessThanOrEqual(131);
        });
      }),
    );
  });

  it('is zero where the field is a plane', () => {
    const bytes = packRaster(Uint16Array.from({ length: 100 }, (_, k) => 1 + 259 * ((k % 10) + Math.floor(k / 10))), 10, 10);
    expect(bytes.filter((byte) => byte !== 0 && byte !== 1).length).toBeLessThanOrEqual(1);
  });

  it('is refused where its size is wrong', () => {
    expect(() => packRaster(new Uint16Array(5), 2, 3)).toThrow(/has 6 codes, got 5/);
    expect(() => unpackRaster(new Uint8Array(5), 2, 3)).toThrow(/has 6 bytes, got 5/);
  });
});

describe('packed rings', () => {
  const values = Float64Array.from({ length: 60 * 50 }, (_, k) => -(((Math.hypot((k % 60) - 30, Math.floor(k / 60) - 25) - 15) / 5) ** 2));
  const bands = contourBands(contourRoom(60, 50), values, [-2, -1, 5]);

  it('come back in their number, with their holes and with the area they had', () => {
    const back = unpackRings(packRings(bands));
    expect(back.map((rings) => rings.ends.length)).toEqual([2, 2, 0]);
    // Leaving out vertices moves an edge of length L by up to 0.15: rings of 60 to 140 cells lose a few cells at most.
    back.forEach((rings, k) => expect(Math.abs(ringsArea(rings) - ringsArea(bands[k]!))).toBeLessThan(0.15 * 2 * Math.PI * 30));
  });

  it('keep every vertex within a thirty-second of a cell of a vertex they had', () => {
    unpackRings(packRings(bands)).forEach(({ points }, k) => {
      const had = bands[k]!.points;
      for (let v = 0; v < points.length; v += 2) {
        let nearest = Infinity;
        for (let w = 0; w < had.length; w += 2) nearest = Math.min(nearest, Math.max(Math.abs(points[v]! - had[w]!), Math.abs(points[v + 1]! - had[w + 1]!)));
        expect(nearest).toBeLessThanOrEqual(1 / 32 + 1e-12);
      }
    });
  });

  it('say so when they are cut short', () => {
    const packed = packRings(bands);
    expect(() => unpackRings(packed.subarray(0, packed.length - 70))).toThrow(/in the middle of a number/);
  });
});
