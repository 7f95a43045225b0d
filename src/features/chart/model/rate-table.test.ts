import { describe, expect, it } from 'vitest';
import { massUnder, readRateTable, writeRateTable } from './rate-table';

describe('a pasted table of rates', () => {
  it('reads clock-like times and rates parted by tabs, and leaves a heading out', () => {
    expect(readRateTable('time\tkg/h\n0:00\t3600\n0:30\t0', 'kg/h')).toEqual({ rows: [{ atS: 0, rate: 1 }, { atS: 1_800, rate: 0 }] });
  });

  it('reads minutes and decimal commas parted by semicolons', () => {
    expect(readRateTable('0;1,5\n10;0', 'kg/s')).toEqual({ rows: [{ atS: 0, rate: 1.5 }, { atS: 600, rate: 0 }] });
  });

  it.each([
    ['0:00 1\n0:00 2', 'Line 2: 0:00 is not after the line before it: times must ascend'],
    ['0:00 1\nx 2', 'Line 2: "x" is not a time: give h:mm after the start, or minutes'],
    ['0:00 1\n1:00 -2', 'Line 2: "-2" is not a rate: give a number of 0 or more'],
    ['0:00 1 2\n1:00 2', 'Line 1 has 3 columns ("0:00 1 2"): give two, time and rate'],
    ['0:00 1', '1 rows read: a table of rates needs at least two'],
    ['0:00 0\n1:00 0', 'Every rate is 0: give at least one above 0'],
  ])('refuses %j and names the line', (text, error) => {
    expect(readRateTable(text, 'kg/s')).toEqual({ error });
  });

  it('writes what it reads', () => {
    const read = readRateTable('0:00\t120\n0:30\t80\n2:00\t0', 'kg/h');
    expect(writeRateTable('rows' in read ? read.rows : [], 'kg/h')).toBe('0:00\t120\n0:30\t80\n2:00\t0');
  });

  it('adds up the mass under the line', () => {
    expect(massUnder([{ atS: 0, rate: 2 }, { atS: 100, rate: 0 }])).toBe(100);
  });
});
