import { describe, expect, it } from 'vitest';
import { changesBetween } from './register-changes';

describe('changes between versions', () => {
  it('are named by path with both values', () => {
    expect(changesBetween({ name: 'A', data: { closingMinutes: 20, contact: { phone: '1' } } }, { name: 'A', data: { closingMinutes: 35, contact: { phone: '2' } } })).toEqual([
      { path: 'data.closingMinutes', from: '20', to: '35' },
      { path: 'data.contact.phone', from: '1', to: '2' },
    ]);
  });

  it('count a redrawn line as one change', () => {
    const line = Array.from({ length: 500 }, (_, i) => [i, 0, 500 - i]);
    expect(changesBetween({ centreline: line }, { centreline: line.slice(1) })).toEqual([{ path: 'centreline', from: '500 positions', to: '499 positions' }]);
  });

  it('count rings by their positions', () => {
    const ring = [[0, 0], [1, 0], [1, 1], [0, 0]];
    expect(changesBetween({ area: [ring] }, { area: [ring, ring] })).toEqual([{ path: 'area', from: '4 positions', to: '8 positions' }]);
  });

  it('tell a row that came or went by what stands in it', () => {
    expect(changesBetween({ rows: [] }, { rows: [{ substanceId: 'phenol', value: 1, note: '' }] })).toEqual([{ path: 'rows.0', from: '', to: 'phenol, 1' }]);
  });

  it('are none where nothing differs', () => {
    expect(changesBetween({ a: [1, { b: null }] }, { a: [1, { b: null }] })).toEqual([]);
  });

  it('are told up to two hundred, so that a new river does not drown the page', () => {
    const rows = (value: number) => Array.from({ length: 900 }, () => ({ value }));
    expect(changesBetween({ rows: rows(1) }, { rows: rows(2) })).toHaveLength(200);
  });
});
