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

/**
 * Feeds chunks of any size, gives whole messages; the payload is a copy. Bytes that wait for the rest of their message
 * are kept in a buffer that grows by doubling: each byte is copied a bounded number of times however small the chunks.
 */
export class MessageReader {
  private buffer = new Uint8Array(65_536);
  private from = 0;
  private to = 0;
  private readonly text = new TextDecoder();

  /** Bytes of a message whose end has not come yet. */
  get pendingBytes(): number {
    return this.to - this.from;
  }

  push(chunk: Uint8Array): { head: StreamHead; payload: Uint8Array }[] {
    this.keep(chunk);
    const out: { head: StreamHead; payload: Uint8Array }[] = [];
    for (let message = this.take(); message; message = this.take()) out.push(message);
    return out;
  }

  private keep(chunk: Uint8Array): void {
    if (this.to + chunk.length > this.buffer.length) {
      const pending = this.buffer.subarray(this.from, this.to);
      const needed = pending.length + chunk.length;
      if (needed > this.buffer.length / 2) {
        const wider = new Uint8Array(2 * needed);
        wider.set(pending);
        this.buffer = wider;
      } else this.buffer.copyWithin(0, this.from, this.to);
      this.to = pending.length;
      this.from = 0;
    }
    this.buffer.set(chunk, this.to);
    this.to += chunk.length;
  }

  private take(): { head: StreamHead; payload: Uint8Array } | null {
    if (this.pendingBytes < 4) return null;
    const view = new DataView(this.buffer.buffer, this.from, this.pendingBytes);
    const headLength = view.getUint32(0, true);
    if (this.pendingBytes < 8 + headLength) return null;
    const end = 8 + headLength + view.getUint32(4 + headLength, true);
    if (this.pendingBytes < end) return null;
    const message = this.buffer.subarray(this.from, this.from + end);
    this.from += end;
    return { head: JSON.parse(this.text.decode(message.subarray(4, 4 + headLength))) as StreamHead, payload: message.slice(8 + headLength) };
  }
}
