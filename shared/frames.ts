/**
 * The stream of an estimate: messages, each a little-endian uint32 length of a UTF-8 JSON head, the head,
 * a uint32 length of a payload, the payload. Previews and stored runs use the same stream, so the browser
 * has one reader. Frames hold concentrations on a logarithmic scale of 16 bits.
 */
import type { EstimateResult, Level, ReceptorAnswer } from './schemas/estimate-result';

/** Nodes on a local plane (shared/geo.ts): node (i, j) at x0M + i*dxM, y0M + j*dyM; row-major, x fastest. */
export type PlaneGrid = { kind: 'plane'; originLon: number; originLat: number; x0M: number; y0M: number; dxM: number; dyM: number; nx: number; ny: number };
/** One stretch of a reach: nodes at the chainages, times `nAcross` nodes from the left bank (0) to the right (1); across fastest. */
export type ChannelGridPart = { reachId: string; chainageKm: number[]; nAcross: number };
export type ChannelGrid = { kind: 'channel'; parts: ChannelGridPart[] };
export type FrameGrid = PlaneGrid | ChannelGrid;

/** Code 0: below the floor. 1..65534: value = floor * (top/floor)^((code-1)/65533). 65535: no estimate here. */
export type FrameScale = { floor: number; top: number };
export const NO_ESTIMATE = 65_535;

export type FrameHead = { type: 'frame'; index: number; timeS: number; grid: FrameGrid; scale: FrameScale; max: number };
/** Largest value over all time at each node; same shape rules as a frame. */
export type EnvelopeHead = { type: 'envelope'; grid: FrameGrid; scale: FrameScale; max: number };
export type StreamHead =
  | { type: 'start'; solver: string; engineVersion: string; unit: 'kg/m3' | 'counts/m3'; levels: Level[]; frameTimesS: number[] }
  | { type: 'progress'; stage: string; done: number; of: number }
  | { type: 'receptor'; answer: ReceptorAnswer }
  | FrameHead
  | EnvelopeHead
  | { type: 'result'; result: EstimateResult }
  | { type: 'failed'; code: string; title: string; detail: string; errors: { path: string; message: string }[] };

export const nodeCount = (grid: FrameGrid): number =>
  grid.kind === 'plane' ? grid.nx * grid.ny : grid.parts.reduce((sum, part) => sum + part.chainageKm.length * part.nAcross, 0);

/** Codes for concentrations; NaN becomes NO_ESTIMATE. */
export function encodeValues(values: Float64Array | Float32Array, scale: FrameScale): Uint16Array {
  const out = new Uint16Array(values.length);
  const perLog = 65_533 / Math.log(scale.top / scale.floor);
  for (let i = 0; i < values.length; i++) {
    const v = values[i]!;
    out[i] = Number.isNaN(v) ? NO_ESTIMATE : v < scale.floor ? 0 : Math.min(65_534, 1 + Math.round(Math.log(v / scale.floor) * perLog));
  }
  return out;
}

export const decodeValue = (code: number, scale: FrameScale): number =>
  code === 0 ? 0 : code === NO_ESTIMATE ? Number.NaN : scale.floor * Math.exp(((code - 1) / 65_533) * Math.log(scale.top / scale.floor));

export function writeMessage(head: StreamHead, payload: Uint8Array = new Uint8Array(0)): Uint8Array {
  const headBytes = new TextEncoder().encode(JSON.stringify(head));
  const out = new Uint8Array(8 + headBytes.length + payload.length);
  const view = new DataView(out.buffer);
  view.setUint32(0, headBytes.length, true);
  out.set(headBytes, 4);
  view.setUint32(4 + headBytes.length, payload.length, true);
  out.set(payload, 8 + headBytes.length);
  return out;
}

/** Feeds chunks of any size, gives whole messages; the payload is a copy. */
export class MessageReader {
  private kept = new Uint8Array(0);

  push(chunk: Uint8Array): { head: StreamHead; payload: Uint8Array }[] {
    const all = new Uint8Array(this.kept.length + chunk.length);
    all.set(this.kept);
    all.set(chunk, this.kept.length);
    const view = new DataView(all.buffer);
    const out: { head: StreamHead; payload: Uint8Array }[] = [];
    let at = 0;
    while (at + 4 <= all.length) {
      const headLength = view.getUint32(at, true);
      if (at + 8 + headLength > all.length) break;
      const payloadLength = view.getUint32(at + 4 + headLength, true);
      const end = at + 8 + headLength + payloadLength;
      if (end > all.length) break;
      const head = JSON.parse(new TextDecoder().decode(all.subarray(at + 4, at + 4 + headLength))) as StreamHead;
      out.push({ head, payload: all.slice(at + 8 + headLength, end) });
      at = end;
    }
    this.kept = all.slice(at);
    return out;
  }
}
