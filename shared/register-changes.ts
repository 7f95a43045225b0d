import type { RegisterChange } from './schemas/registers';

const MOST_CHANGES = 200;
const MOST_TEXT = 80;

/** What differs between two versions, by path. A line or ring of positions counts as one value. */
export function changesBetween(before: unknown, after: unknown): RegisterChange[] {
  const changes: RegisterChange[] = [];
  compare(before, after, [], changes);
  return changes;
}

function compare(before: unknown, after: unknown, path: readonly string[], changes: RegisterChange[]): void {
  if (changes.length >= MOST_CHANGES) return;
  if (isBranch(before) && isBranch(after) && Array.isArray(before) === Array.isArray(after)) {
    for (const key of new Set([...Object.keys(before), ...Object.keys(after)])) compare(before[key], after[key], [...path, key], changes);
    return;
  }
  if (JSON.stringify(before) !== JSON.stringify(after)) changes.push({ path: path.join('.'), from: textOf(before), to: textOf(after) });
}

const isBranch = (value: unknown): value is Record<string, unknown> => typeof value === 'object' && value !== null && !isFigures(value);

/** Numbers, or lists of numbers: positions, lines, rings. */
const isFigures = (value: unknown): boolean => Array.isArray(value) && value.length > 0 && value.every((item) => typeof item === 'number' || isFigures(item));

const positionsIn = (figures: unknown[]): number => (figures.every(Array.isArray) ? figures.reduce((sum: number, item) => sum + positionsIn(item as unknown[]), 0) : 1);

function textOf(value: unknown): string {
  if (value === undefined || value === null) return '';
  if (typeof value === 'boolean') return value ? 'yes' : 'no';
  if (Array.isArray(value) && isFigures(value[0])) return `${positionsIn(value)} positions`;
  const text = typeof value === 'string' ? value : isBranch(value) ? summaryOf(value) : JSON.stringify(value);
  return text.length > MOST_TEXT ? `${text.slice(0, MOST_TEXT - 3)}...` : text;
}

/** A row or a list that came or went whole: its plain values in order. */
const summaryOf = (value: Record<string, unknown>): string =>
  Object.values(value)
    .filter((item) => item !== null && item !== '')
    .map((item) => (typeof item === 'object' ? summaryOf(item as Record<string, unknown>) : String(item)))
    .filter((text) => text !== '')
    .join(', ');
