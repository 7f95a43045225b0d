import { estimateLimits } from '../../../../shared/schemas/estimate';

export type RateRow = { atS: number; rate: number };
export type RateUnit = 'kg/s' | 'kg/min' | 'kg/h';
const perSecond: Record<RateUnit, number> = { 'kg/s': 1, 'kg/min': 1 / 60, 'kg/h': 1 / 3_600 };

const clock = /^(?:(\d+)\s*d\s*)?(\d{1,3}):([0-5]\d)(?::([0-5]\d))?$/;

/** Elapsed time as h:mm or h:mm:ss, or as a plain number of minutes. */
function elapsedS(text: string): number | null {
  const match = clock.exec(text.replace(/^T\+/i, ''));
  if (match) return Number(match[1] ?? 0) * 86_400 + Number(match[2]) * 3_600 + Number(match[3]) * 60 + Number(match[4] ?? 0);
  return /^\d+([.,]\d+)?$/.test(text) ? Number(text.replace(',', '.')) * 60 : null;
}

/**
 * Reads two pasted columns, time after T0 (h:mm, or minutes) and rate in `unit`, one row a line, parted by tab, semicolon
 * or spaces. A first line without figures is taken as heading. Errors name the line.
 */
export function readRateTable(text: string, unit: RateUnit): { rows: RateRow[] } | { error: string } {
  const lines = text.split(/\r?\n/).map((line, i) => ({ text: line.trim(), number: i + 1 })).filter((line) => line.text !== '');
  const rows: RateRow[] = [];
  for (const [i, line] of lines.entries()) {
    const parts = line.text.split(/\s*[\t;]\s*|\s+/);
    const atS = elapsedS(parts[0] ?? '');
    const rate = parts[1] === undefined ? Number.NaN : Number(parts[1].replace(',', '.'));
    if (i === 0 && atS === null && Number.isNaN(rate)) continue;
    if (parts.length !== 2) return { error: `Line ${line.number} has ${parts.length} columns ("${line.text}"): give two, time and rate` };
    if (atS === null) return { error: `Line ${line.number}: "${parts[0]}" is not a time: give h:mm after the start, or minutes` };
    if (!Number.isFinite(rate) || rate < 0) return { error: `Line ${line.number}: "${parts[1]}" is not a rate: give a number of 0 or more` };
    const before = rows[rows.length - 1];
    if (before && atS <= before.atS) return { error: `Line ${line.number}: ${parts[0]} is not after the line before it: times must ascend` };
    rows.push({ atS, rate: rate * perSecond[unit] });
  }
  if (rows.length < 2) return { error: `${rows.length} rows read: a table of rates needs at least two` };
  if (rows.length > estimateLimits.tableRows) return { error: `${rows.length} rows: at most ${estimateLimits.tableRows} can be used` };
  if (rows.every((row) => row.rate === 0)) return { error: 'Every rate is 0: give at least one above 0' };
  return { rows };
}

const elapsedText = (s: number): string => `${Math.floor(s / 3_600)}:${String(Math.floor((s % 3_600) / 60)).padStart(2, '0')}${s % 60 ? `:${String(Math.round(s % 60)).padStart(2, '0')}` : ''}`;
export const writeRateTable = (rows: readonly { atS: number | null; rate: number | null }[], unit: RateUnit): string =>
  rows.map((row) => `${elapsedText(row.atS ?? 0)}\t${Number(((row.rate ?? 0) / perSecond[unit]).toPrecision(6))}`).join('\n');

/** kg under the piecewise-linear rate. */
export const massUnder = (rows: readonly RateRow[]): number =>
  rows.slice(1).reduce((sum, row, i) => sum + ((row.rate + rows[i]!.rate) / 2) * (row.atS - rows[i]!.atS), 0);
