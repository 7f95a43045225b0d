import { Section } from '../../../components/page';
import { choicesOf, kindWords } from '../model/register-words';
import { FieldGrid, LongTextField, SelectField } from './bound-fields';
import { PlaceFields } from './place-fields';
import { NotesSection } from './notes-section';

const kinds = choicesOf(kindWords, ['gauge', 'sampling-point', 'tide-gauge', 'current-meter', 'weather']);

export function StationFields() {
  return (
    <>
      <Section title="What it is">
        <FieldGrid>
          <SelectField name="data.kind" label="Kind" choices={kinds} />
          <LongTextField name="data.access" label="Access" hint="How a crew gets there, keys, light, traffic, floods" isOptional showsEmpty />
        </FieldGrid>
      </Section>
      <PlaceFields note="bank looking downstream" />
      <NotesSection />
    </>
  );
}
