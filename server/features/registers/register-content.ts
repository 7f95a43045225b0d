import type { RegisterItemRow } from '../../db/entities/register.entities';

/** What a version keeps of an entry: everything that people write. */
export type RegisterContent = Pick<RegisterItemRow, 'code' | 'name' | 'ownerName' | 'lastCheckedOn' | 'isArchived' | 'data'>;

export const contentOf = ({ code, name, ownerName, lastCheckedOn, isArchived, data }: RegisterItemRow): RegisterContent => ({ code, name, ownerName, lastCheckedOn, isArchived, data });

/** Stands in addresses for an entry that is yet to be written. */
const RESERVED = 'new';

/** An id that people can read: "INT-1" becomes int-1. Free of those taken. */
export function slugOf(code: string, taken: ReadonlySet<string>): string {
  const base = slugBase(code);
  for (let n = 1; ; n++) {
    const id = n === 1 ? base : `${base}-${n}`;
    if (id !== RESERVED && !taken.has(id)) return id;
  }
}

export const slugBase = (code: string): string =>
  code
    .normalize('NFKD')
    .replace(/\p{M}/gu, '')
    .toLowerCase()
    .replace(/[^a-z0-9]+/g, '-')
    .replace(/^-+|-+$/g, '')
    .slice(0, 56) || 'entry';
