import { Section } from '../../../components/page';
import { FieldGrid, LongTextField, useValue } from './bound-fields';
import { useIsWriting } from './entry-mode';

/** What fits nowhere else; no heading over nothing. */
export function NotesSection() {
  const note = useValue<string>('data.note');
  if (!useIsWriting() && !note) return null;
  return (
    <Section title="Notes">
      <FieldGrid>
        <LongTextField name="data.note" label="Note" isOptional />
      </FieldGrid>
    </Section>
  );
}
