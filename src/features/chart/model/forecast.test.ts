import { describe, expect, it } from 'vitest';
import { encodeValues } from '../../../../shared/frames';
import { emptyForecast, frameIndexAt, withMessage, type Forecast } from './forecast';

const grid = { kind: 'plane' as const, originLon: 0, originLat: 0, x0M: 0, y0M: 0, dxM: 1, dyM: 1, nx: 2, ny: 1 };
const scale = { floor: 1e-9, top: 1 };

function withFrames(indexes: number[]): Forecast {
  const started = withMessage(emptyForecast, { type: 'start', solver: 's', engineVersion: '1', unit: 'kg/m3', levels: [], frameTimesS: [0, 100, 200] });
  return indexes.reduce((forecast, index) => {
    const codes = encodeValues(Float64Array.from([0.5, 0]), scale);
    return withMessage(forecast, { type: 'frame', frame: { head: { type: 'frame', index, timeS: index * 100, grid, scale, max: 0.5 }, codes } });
  }, started);
}

describe('a forecast as it streams in', () => {
  it('keeps the codes of a frame at its index', () => {
    expect([...withFrames([0]).frames[0]!.codes]).toEqual([...encodeValues(Float64Array.from([0.5, 0]), scale)]);
  });

  it('shows the last frame not after the time, as far as frames have come', () => {
    const forecast = withFrames([0, 2]);
    expect([0, 150, 200, 999].map((s) => frameIndexAt(forecast, s))).toEqual([0, 0, 2, 2]);
  });

  it('shows the first frame there is when none is early enough', () => {
    expect(frameIndexAt(withFrames([1]), 0)).toBe(1);
  });

  it('shows none while none has come', () => {
    expect(frameIndexAt(withFrames([]), 100)).toBeNull();
  });
});
