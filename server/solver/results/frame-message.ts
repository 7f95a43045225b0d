import { encodeValues, type FrameScale } from '../../../shared/frames';
import type { Level } from '../../../shared/schemas/estimate-result';
import type { GriddedField } from '../types';

/** Values below this share of the lowest level are not sent. */
const FLOOR_SHARE = 0.01;

export const largestOf = (values: Float64Array): number => {
  let most = 0;
  for (let i = 0; i < values.length; i++) if (values[i]! > most) most = values[i]!;
  return most;
};

/** Scale and bytes of a field: 16-bit logarithms from a hundredth of the lowest level up to the largest value. */
export function packField(field: GriddedField, levels: readonly Level[]): { scale: FrameScale; max: number; payload: Uint8Array } {
  const max = largestOf(field.values);
  const floor = (levels[0]?.value ?? (max > 0 ? max : 1)) * FLOOR_SHARE;
  const scale = { floor, top: Math.max(max, floor * 10) };
  const codes = encodeValues(field.values, scale);
  return { scale, max, payload: new Uint8Array(codes.buffer, codes.byteOffset, codes.byteLength) };
}
