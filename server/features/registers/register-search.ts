import type { RegisterListQuery } from '../../../shared/schemas/registers';
import type { RegisterHeading } from './register.repository';

const byCode = new Intl.Collator('en', { numeric: true, sensitivity: 'base' });

/** Letters without case and accents, so that "ecluse" finds "Écluse". */
const folded = (text: string): string => text.normalize('NFKD').replace(/\p{M}/gu, '').toLowerCase();

const haystack = ({ code, name, ownerName, otherNames, cas }: RegisterHeading): string => folded([code, name, ownerName, otherNames ?? '', cas ?? ''].join('\n'));

/** The entries that hold every word searched for, sorted by code as people count: INT-2 before INT-10. */
export function searchHeadings(headings: readonly RegisterHeading[], query: Pick<RegisterListQuery, 'search' | 'archived' | 'stale'>, isStale: (heading: RegisterHeading) => boolean): RegisterHeading[] {
  const words = folded(query.search).split(/\s+/).filter(Boolean);
  return headings
    .filter((heading) => query.archived || !heading.isArchived)
    .filter((heading) => !query.stale || isStale(heading))
    .filter((heading) => {
      if (words.length === 0) return true;
      const text = haystack(heading);
      return words.every((word) => text.includes(word));
    })
    .toSorted((a, b) => Number(a.isArchived) - Number(b.isArchived) || byCode.compare(a.code, b.code));
}
