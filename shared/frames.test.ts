import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { decodeValue, encodeValues, MessageReader, NO_ESTIMATE, nodeCount, writeMessage, type StreamHead } from './frames';

const scale = { floor: 1e-9, top: 2 };

describe('frame values', () => {
  it('come back within 0.02 % of what they were, between floor and top', () =>
    fc.assert(
      fc.property(fc.double({ min: 1e-9, max: 2, noNaN: true }), (value) => {
        const [code] = encodeValues(Float64Array.of(value), scale);
        // Half a step of the logarithmic scale: ln(2e9)/65533/2 = 1.6e-4.
        expect(Math.abs(decodeValue(code!, scale) / value - 1)).toBeLessThan(1.7e-4);
      }),
    ));

  it('keep nothing, no estimate and the top apart', () => {
    expect([...encodeValues(Float64Array.of(0, 1e-12, Number.NaN, 2, 5), scale)]).toEqual([0, 0, NO_ESTIMATE, 65_534, 65_534]);
    expect(decodeValue(0, scale)).toBe(0);
    expect(decodeValue(NO_ESTIMATE, scale)).toBeNaN();
    expect(decodeValue(65_534, scale)).toBeCloseTo(2, 12);
  });

  it('are counted by their grid', () => {
    expect(nodeCount({ kind: 'plane', originLon: 0, originLat: 0, x0M: 0, y0M: 0, dxM: 1, dyM: 1, nx: 5, ny: 4 })).toBe(20);
    expect(nodeCount({ kind: 'channel', parts: [{ reachId: 'a', chainageKm: [3, 2, 1], nAcross: 9 }, { reachId: 'b', chainageKm: [1, 0], nAcross: 9 }] })).toBe(45);
  });
});

describe('the message stream', () => {
  it('is read whole however it is cut', () =>
    fc.assert(
      fc.property(fc.array(fc.uint8Array({ maxLength: 40 }), { minLength: 1, maxLength: 5 }), fc.integer({ min: 1, max: 17 }), (payloads, size) => {
        const sent = payloads.map((payload, i): { head: StreamHead; payload: Uint8Array } => ({ head: { type: 'progress', stage: 'Fähre', done: i, of: payloads.length }, payload }));
        const bytes = Uint8Array.from(sent.flatMap(({ head, payload }) => [...writeMessage(head, payload)]));
        const reader = new MessageReader();
        const read: typeof sent = [];
        for (let i = 0; i < bytes.length; i += size) read.push(...reader.push(bytes.slice(i, i + size)));
        expect(read.map(({ head, payload }) => ({ head, payload: [...payload] }))).toEqual(sent.map(({ head, payload }) => ({ head, payload: [...payload] })));
      }),
    ));
});
