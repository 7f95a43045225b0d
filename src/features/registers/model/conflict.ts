import { changesBetween } from '../../../../shared/register-changes';
import type { RegisterChange } from '../../../../shared/schemas/registers';
import type { EntryValues } from './empty-entry';

/** One part of an entry that somebody else has changed while it was being edited here. */
export type ConflictPart = { path: string; theirs: RegisterChange[]; mine: RegisterChange[] };

export const valueAt = (values: unknown, path: string): unknown => path.split('.').reduce<unknown>((at, key) => (typeof at === 'object' && at !== null ? (at as Record<string, unknown>)[key] : undefined), values);

const lengthAt = (values: unknown, path: string): number => {
  const value = valueAt(values, path);
  return Array.isArray(value) ? value.length : -1;
};

/** Parts are taken whole: a field, a table, or a reach while no reach came or went. */
function partOf(path: string, versions: readonly EntryValues[]): string {
  const keys = path.split('.');
  const lengths = new Set(versions.map((values) => lengthAt(values, 'data.reaches')));
  if (keys[1] === 'reaches' && keys.length > 2 && lengths.size === 1) return keys.slice(0, 3).join('.');
  return keys.slice(0, keys[0] === 'data' ? 2 : 1).join('.');
}

const isContent = ({ path }: RegisterChange): boolean => path !== 'reason';

/** What they changed since the version this edit began with, beside what was changed here in the same part. */
export function conflictParts(base: EntryValues, theirs: EntryValues, mine: EntryValues): ConflictPart[] {
  const versions = [base, theirs, mine];
  const parts = new Map<string, ConflictPart>();
  for (const change of changesBetween(base, theirs).filter(isContent)) {
    const path = partOf(change.path, versions);
    const part = parts.get(path) ?? { path, theirs: [], mine: [] };
    part.theirs.push(change);
    parts.set(path, part);
  }
  for (const change of changesBetween(base, mine).filter(isContent)) parts.get(partOf(change.path, versions))?.mine.push(change);
  return [...parts.values()];
}
