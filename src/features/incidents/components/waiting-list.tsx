import type { Watch } from '../../../../shared/schemas/incidents';
import { Section } from '../../../components/page';
import { RuledList, RuledRow } from '../../../components/ruled-list';

/** What waits for this person: how many, in words, and where to go. */
export function WaitingList({ waiting }: { waiting: Watch['waiting'] }) {
  return (
    <Section title="Waits for you">
      {waiting.length === 0 && <p className="py-4 text-ink2">Nothing waits for you.</p>}
      <RuledList label="Waits for you">
        {waiting.map((item) => (
          <RuledRow key={`${item.kind}-${item.href}`} to={item.href} openLabel={`${item.count} ${item.text}`} leadWidth="narrow" lead={<span className="text-lead font-semibold text-ink">{item.count}</span>}>
            {item.text}
          </RuledRow>
        ))}
      </RuledList>
    </Section>
  );
}
