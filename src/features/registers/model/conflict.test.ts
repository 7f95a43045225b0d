import { describe, expect, it } from 'vitest';
import { conflictParts } from './conflict';
import { emptyEntry, type EntryValues } from './empty-entry';

const base = emptyEntry('receptors');
const withData = (patch: object, more: Partial<EntryValues> = {}): EntryValues => ({ ...base, ...more, data: { ...base.data, ...patch } });

describe('parts of a conflict', () => {
  it('are those that the other person changed, with what was changed here in the same part', () => {
    const theirs = withData({ closingMinutes: 30 }, { name: 'Theirs' });
    const mine = withData({ closingMinutes: 45, storageHours: 9 });
    expect(conflictParts(base, theirs, mine)).toEqual([
      { path: 'name', theirs: [{ path: 'name', from: '', to: 'Theirs' }], mine: [] },
      { path: 'data.closingMinutes', theirs: [{ path: 'data.closingMinutes', from: '', to: '30' }], mine: [{ path: 'data.closingMinutes', from: '', to: '45' }] },
    ]);
  });

  it('take a table whole, so that rows of two people are never mixed', () => {
    const row = (value: number) => ({ substanceId: 'phenol', value });
    const parts = conflictParts(withData({ actionValues: [row(1)] }), withData({ actionValues: [row(2)] }), withData({ actionValues: [row(1), row(3)] }));
    expect(parts.map(({ path, mine }) => [path, mine.length])).toEqual([['data.actionValues', 1]]);
  });

  it('take a river reach by reach while no reach came or went', () => {
    const river = (a: number, b: number) => ({ ...base, data: { reaches: [{ slope: a }, { slope: b }] } });
    expect(conflictParts(river(1, 1), river(1, 2), river(3, 1))).toEqual([{ path: 'data.reaches.1', theirs: [{ path: 'data.reaches.1.slope', from: '1', to: '2' }], mine: [] }]);
  });

  it('leave out the reason, which belongs to one writing', () => {
    expect(conflictParts(base, { ...base, reason: 'x' }, base)).toEqual([]);
  });
});
