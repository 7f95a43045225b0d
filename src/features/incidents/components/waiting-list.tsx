import type { Watch } from '../../../../shared/schemas/incidents';
import { Icon, type IconName } from '../../../components/icon';
import { Section } from '../../../components/page';
import { RuledList, RuledRow } from '../../../components/ruled-list';

const icons: Record<Watch['waiting'][number]['kind'], IconName> = { 'stale-register': 'clock', 'unsaved-draft': 'edit', 'failed-run': 'attention', 'failed-mail': 'mail', password: 'person' };

/** What waits for this person: what it is, in words, and where to go. */
export function WaitingList({ waiting }: { waiting: Watch['waiting'] }) {
  return (
    <Section title="Waits for you">
      {waiting.length === 0 && <p className="py-4 text-ink2">Nothing waits for you.</p>}
      <RuledList label="Waits for you">
        {waiting.map((item) => (
          <RuledRow key={`${item.kind}-${item.href}`} to={item.href} openLabel={item.text} leadWidth="mark" lead={<Icon name={icons[item.kind]} />}>
            <p className="break-words">{item.text}</p>
          </RuledRow>
        ))}
      </RuledList>
    </Section>
  );
}
