import { Section } from '../../../components/page';
import { choicesOf, kindWords } from '../model/register-words';
import { FieldGrid, LongTextField, SelectField, TextField } from './bound-fields';
import { ContactFields } from './contact-fields';
import { PlaceFields } from './place-fields';
import { useSubstanceChoices } from './receptor-fields';
import { RowsEditor } from './rows-editor';
import { NotesSection } from './notes-section';

const kinds = choicesOf(kindWords, ['site', 'tank', 'bridge', 'outfall', 'berth', 'pipeline', 'store', 'other']);

export function SourceFields() {
  const substances = useSubstanceChoices();
  return (
    <>
      <Section title="What it is">
        <FieldGrid>
          <SelectField name="data.kind" label="Kind" choices={kinds} />
          <TextField name="data.operator" label="Operator" isOptional />
          <LongTextField name="data.drainPath" label="Way to the water" hint="Drains, ditches, interceptors, valves" isOptional showsEmpty />
        </FieldGrid>
      </Section>
      <ContactFields />
      <PlaceFields note="where a release enters the water" />
      <Section title="Holdings" note="largest credible quantity that can run out">
        <RowsEditor
          name="data.holdings" caption="Holdings" rowWord="holding" addLabel="Add holding" most={60}
          empty="No holdings. Edit the entry to add each substance with the largest quantity that can credibly run out."
          newRow={() => ({ substanceId: '', largestCredible: null, strengthNote: '' })}
          columns={[
            { key: 'substanceId', label: 'Substance', kind: 'choice', choices: substances, width: 'min-w-52', isWide: true },
            { key: 'largestCredible', label: 'Largest credible', unit: 'kg, or organisms where counted', kind: 'number', width: 'min-w-40' },
            { key: 'strengthNote', label: 'Strength', kind: 'text', width: 'min-w-56', isWide: true },
          ]}
        />
      </Section>
      <NotesSection />
    </>
  );
}
