import type { Watch } from '../../../../shared/schemas/incidents';
import { Icon, type IconName } from '../../../components/icon';
import { Section } from '../../../components/page';
import { RuledList, RuledRow } from '../../../components/ruled-list';

type Kind = Watch['waiting'][number]['kind'];
const kinds: Record<Kind, { icon: IconName; todo: string }> = {
  'failed-run': { icon: 'attention', todo: 'Read why, mend the scenario and solve it again.' },
  'unsaved-draft': { icon: 'edit', todo: 'Save it as a revision, or go on drafting.' },
  'failed-mail': { icon: 'mail', todo: 'Read why in the outbox, and pass the news on another way.' },
  'stale-register': { icon: 'clock', todo: 'Look at each and mark it as checked.' },
};

/** What waits for this person: what it is, in words, and where to go. */
export function WaitingList({ waiting }: { waiting: Watch['waiting'] }) {
  return (
    <Section title="Waits for you">
      {waiting.length === 0 && <p className="py-4 text-ink2">Nothing waits for you.</p>}
      <RuledList label="Waits for you">
        {waiting.map((item) => (
          <RuledRow key={`${item.kind}-${item.href}`} to={item.href} openLabel={item.text} leadWidth="mark" lead={<Icon name={kinds[item.kind].icon} />}>
            <p className="break-words">{item.text}</p>
            <p className="text-note text-ink2">{kinds[item.kind].todo}</p>
          </RuledRow>
        ))}
      </RuledList>
    </Section>
  );
}
