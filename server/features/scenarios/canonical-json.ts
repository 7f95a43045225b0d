import { createHash } from 'node:crypto';

/** JSON with the keys of every object in order, so that equal documents give equal text. */
export function canonicalJson(value: unknown): string {
  return JSON.stringify(value, (_key, item: unknown) =>
    item !== null && typeof item === 'object' && !Array.isArray(item) ? Object.fromEntries(Object.entries(item).sort(([a], [b]) => (a < b ? -1 : a > b ? 1 : 0))) : item,
  );
}

export const documentHash = (document: unknown): string => createHash('sha256').update(canonicalJson(document)).digest('hex');
