import { describe, expect, it } from 'vitest';
import { readCentreline, readFigures, readNames, readRings, writeCentreline, writeRings } from './text-rows';

describe('a centreline as text', () => {
  it('comes back as it was written', () => {
    const line: [number, number, number][] = [[-116.66, -44.415, 54], [-116.73, -44.43, 48.2]];
    expect(readCentreline(writeCentreline(line))).toEqual({ rows: line, problem: null });
  });

  it('takes spaces, tabs and semicolons from a spreadsheet', () => {
    expect(readCentreline('-116.66\t-44.415\t54\n-116.73; -44.43; 48.2').rows).toEqual([[-116.66, -44.415, 54], [-116.73, -44.43, 48.2]]);
  });

  it('names the line that cannot be read and lets nothing pass for a figure', () => {
    const { rows, problem } = readCentreline('-116.66, -44.415, 54\n-116.7, west, 48');
    expect(problem).toBe('Line 2: "west" is not a number. Write longitude, latitude, km with decimal points');
    expect(rows[1]![1]).toBeNaN();
  });

  it('refuses decimal commas, which would make six figures of three', () => {
    expect(readCentreline('-116,66 -44,415 54,0').problem).toContain('Line 1 has 6 figures');
  });
});

describe('an outline as text', () => {
  const ring: [number, number][] = [[0, 0], [1, 0], [1, 1], [0, 0]];

  it('keeps islands apart by an empty line', () => {
    expect(readRings(writeRings([ring, ring]))).toEqual({ rows: [ring, ring], problem: null });
  });

  it('is closed when its end was left open', () => {
    expect(readRings('0, 0\n1, 0\n1, 1').rows).toEqual([ring]);
  });

  it('can be pasted as GeoJSON', () => {
    expect(readRings(JSON.stringify({ type: 'FeatureCollection', features: [{ type: 'Feature', geometry: { type: 'Polygon', coordinates: [ring] } }] })).rows).toEqual([ring]);
  });

  it('says what it got when the GeoJSON is no polygon or is cut off', () => {
    expect(readRings('{"type":"LineString","coordinates":[[0,0]]}').problem).toContain('holds a LineString');
    expect(readRings('{"type":"Poly').problem).toContain('cannot be read');
  });
});

describe('short lists as text', () => {
  it('take names between commas', () => {
    expect(readNames(' Q50, Q95 ,,Q10').rows).toEqual(['Q50', 'Q95', 'Q10']);
  });

  it('take figures between semicolons, with decimal commas', () => {
    expect(readFigures('3; 9,5; 15')).toEqual({ rows: [3, 9.5, 15], problem: null });
    expect(readFigures('3; deep').problem).toContain('"deep" is not a number');
  });
});
