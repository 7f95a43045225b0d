import { StatusWord } from '../../../components/status-word';
import { useDefaultOffset } from '../../../lib/session';
import { useNow } from '../../../lib/use-now';
import { checkedWords } from '../model/checked-words';

/** When an entry was last checked, in words; a stale one says so. */
export function CheckedText({ item }: { item: { lastCheckedOn: string | null; isStale: boolean; isArchived?: boolean } }) {
  const now = useNow(60_000);
  const offset = useDefaultOffset();
  if (item.isArchived) return <StatusWord>archived</StatusWord>;
  const words = checkedWords(item, now, offset);
  return item.isStale ? <StatusWord tone="attention">{words}</StatusWord> : <span className="text-ink2">{words}</span>;
}
