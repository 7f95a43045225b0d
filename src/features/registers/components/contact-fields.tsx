import { Section } from '../../../components/page';
import { FieldGrid, TextField } from './bound-fields';

/** Whom to call. While reading, the number can be called and the address written to. */
export function ContactFields() {
  return (
    <Section title="Contact">
      <FieldGrid>
        <TextField name="data.contact.name" label="Name or desk" isOptional />
        <TextField name="data.contact.phone" label="Phone" type="tel" href={(phone) => `tel:${phone.replace(/[^\d+]/g, '')}`} isOptional />
        <TextField name="data.contact.email" label="E-mail" type="email" href={(email) => `mailto:${email}`} isOptional />
      </FieldGrid>
    </Section>
  );
}
