/**
 * Small forms of a frame for the wire: the whole field in 8 bits a node, and the rings of its levels. Both are made of
 * small whole numbers that a general compressor then shrinks; both are read back without loss beyond their stated steps.
 */
import { NO_ESTIMATE } from './frames';
import type { Rings } from './contours';
import { simplifyRing } from './simplify';

/** Codes of frames.ts in 8 bits: 0 below the floor, 255 no estimate, 1 to 254 the logarithmic scale. */
const LAST_CODE = 65_534;
const LAST_BYTE = 254;
const NONE_BYTE = 255;

const byteOf = (code: number): number => (code === 0 ? 0 : code === NO_ESTIMATE ? NONE_BYTE : 1 + Math.round(((code - 1) / (LAST_CODE - 1)) * (LAST_BYTE - 1)));
const codeOf = (byte: number): number => (byte === 0 ? 0 : byte === NONE_BYTE ? NO_ESTIMATE : 1 + Math.round(((byte - 1) / (LAST_BYTE - 1)) * (LAST_CODE - 1)));

/**
 * What the three nodes already known say of the next one: their plane, held between left and upper neighbour where it
 * overshoots. Source: the median edge detector of Weinberger, Seroussi & Sapiro 2000, IEEE Trans. Image Process. 9:1309.
 */
function predicted(left: number, up: number, upLeft: number): number {
  const low = Math.min(left, up);
  const high = Math.max(left, up);
  return upLeft >= high ? low : upLeft <= low ? high : left + up - upLeft;
}

/**
 * A field's codes (nx*ny, x fastest) as bytes that compress well: 8-bit codes less what their neighbours predict, modulo
 * 256. Values are then good to half a step of ln(top / floor) / 253.
 */
export function packRaster(codes: Uint16Array, nx: number, ny: number): Uint8Array {
  if (codes.length !== nx * ny) throw new RangeError(`A raster of ${nx} x ${ny} has ${nx * ny} codes, got ${codes.length}`);
  const bytes = Uint8Array.from(codes, byteOf);
  const out = new Uint8Array(codes.length);
  for (let at = 0; at < out.length; at++) {
    const i = at % nx;
    out[at] = bytes[at]! - predicted(i > 0 ? bytes[at - 1]! : 0, at >= nx ? bytes[at - nx]! : 0, i > 0 && at >= nx ? bytes[at - nx - 1]! : 0);
  }
  return out;
}

/** Reads `packRaster` back into 16-bit codes. */
export function unpackRaster(packed: Uint8Array, nx: number, ny: number): Uint16Array {
  if (packed.length !== nx * ny) throw new RangeError(`A raster of ${nx} x ${ny} has ${nx * ny} bytes, got ${packed.length}`);
  const bytes = new Uint8Array(packed.length);
  for (let at = 0; at < bytes.length; at++) {
    const i = at % nx;
    bytes[at] = packed[at]! + predicted(i > 0 ? bytes[at - 1]! : 0, at >= nx ? bytes[at - nx]! : 0, i > 0 && at >= nx ? bytes[at - nx - 1]! : 0);
  }
  return Uint16Array.from(bytes, codeOf);
}

/** Rings are kept to a sixteenth of a cell, after leaving out vertices that lie within 0.15 of a cell of the rest. */
const STEPS_PER_CELL = 16;
const SIMPLIFY_CELLS = 0.15;

/** Whole numbers as bytes of seven bits, the eighth telling that more follow; signs in the lowest bit. */
class Numbers {
  private readonly bytes: number[] = [];

  put(value: number): void {
    let rest = value;
    for (; rest > 127; rest >>>= 7) this.bytes.push((rest & 127) | 128);
    this.bytes.push(rest);
  }

  putSigned(value: number): void {
    this.put(value < 0 ? -2 * value - 1 : 2 * value);
  }

  done(): Uint8Array {
    return Uint8Array.from(this.bytes);
  }
}

/** The rings of each level as steps from vertex to vertex; rings that simplify to nothing are left out. */
export function packRings(bands: readonly Rings[]): Uint8Array {
  const out = new Numbers();
  out.put(bands.length);
  for (const { points, ends } of bands) {
    const rings = ends.map((end, k) => simplifyRing([...points.subarray(2 * (ends[k - 1] ?? 0), 2 * end)], SIMPLIFY_CELLS)).filter((ring) => ring.length >= 6);
    out.put(rings.length);
    for (const ring of rings) {
      out.put(ring.length / 2);
      let [x, y] = [0, 0];
      for (let k = 0; k < ring.length; k += 2) {
        const [toX, toY] = [Math.round(ring[k]! * STEPS_PER_CELL), Math.round(ring[k + 1]! * STEPS_PER_CELL)];
        out.putSigned(toX - x);
        out.putSigned(toY - y);
        [x, y] = [toX, toY];
      }
    }
  }
  return out.done();
}

/** Reads `packRings` back. Throws RangeError where the bytes end too soon. */
export function unpackRings(packed: Uint8Array): Rings[] {
  let at = 0;
  const take = (): number => {
    let value = 0;
    for (let shift = 0; ; shift += 7) {
      const byte = packed[at++];
      if (byte === undefined) throw new RangeError(`Packed rings end at byte ${packed.length} in the middle of a number`);
      value |= (byte & 127) << shift;
      if (byte < 128) return value;
    }
  };
  const takeSigned = (): number => {
    const value = take();
    return value & 1 ? -(value >>> 1) - 1 : value >>> 1;
  };
  return Array.from({ length: take() }, () => {
    const points: number[] = [];
    const ends: number[] = [];
    for (let rings = take(); rings > 0; rings--) {
      let [x, y] = [0, 0];
      for (let vertices = take(); vertices > 0; vertices--) {
        x += takeSigned();
        y += takeSigned();
        points.push(x / STEPS_PER_CELL, y / STEPS_PER_CELL);
      }
      ends.push(points.length / 2);
    }
    return { points: Float64Array.from(points), ends };
  });
}
