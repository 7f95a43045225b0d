import { useQuery } from '@tanstack/react-query';
import { receptorKinds } from '../../../../shared/schemas/estimate';
import { Section } from '../../../components/page';
import { registerChoicesQuery } from '../api';
import { choicesOf, kindWords } from '../model/register-words';
import { readFigures, writeFigures } from '../model/text-rows';
import { FieldGrid, NumberField, SelectField } from './bound-fields';
import { ContactFields } from './contact-fields';
import { PlaceFields } from './place-fields';
import { RowsEditor } from './rows-editor';
import { RowsTextField } from './rows-text-field';
import { unitChoices } from './substance-fields';
import { NotesSection } from './notes-section';

export const useSubstanceChoices = () => {
  const { data = [] } = useQuery(registerChoicesQuery('substances'));
  return data.map((item) => ({ value: item.id, label: item.data.basis ? `${item.name} (${item.data.basis})` : item.name }));
};

export function ReceptorFields() {
  const substances = useSubstanceChoices();
  return (
    <>
      <Section title="What it is">
        <FieldGrid>
          <SelectField name="data.kind" label="Kind" choices={choicesOf(kindWords, receptorKinds)} />
          <NumberField name="data.closingMinutes" label="Closing takes" unit="min" hint="From the call until nothing is drawn." range="0 to 43,200." isOptional />
          <NumberField name="data.storageHours" label="Storage" unit="h" hint="How long it can stay closed." range="0 to 8,760." isOptional />
          <RowsTextField name="data.depthsM" label="Draw-off depths, m" hint="With a semicolon between them, such as 3; 9; 15. Empty: at the shore or surface." isLine isOptional read={readFigures} write={writeFigures} summary={(depths) => (depths.length === 0 ? 'at the shore or surface' : `${writeFigures(depths)} m`)} />
          <NumberField name="data.peopleServed" label="People served" range="A whole number." isOptional />
        </FieldGrid>
      </Section>
      <ContactFields />
      <PlaceFields note="bank looking downstream" />
      <Section title="Action values" note="the concentrations at which it acts">
        <RowsEditor
          name="data.actionValues" caption="Action values" rowWord="action value" addLabel="Add action value" most={60}
          empty="No action values. Edit the entry to add them: without one, a forecast shows concentrations here but no arrival."
          newRow={() => ({ substanceId: '', value: null, unit: 'ug/l', basis: '', averagingMinutes: 0, source: '' })}
          columns={[
            { key: 'substanceId', label: 'Substance', kind: 'choice', choices: substances, width: 'min-w-52', isWide: true },
            { key: 'value', label: 'Value', kind: 'number', width: 'min-w-28' },
            { key: 'unit', label: 'Unit', kind: 'choice', choices: unitChoices, width: 'min-w-36' },
            { key: 'basis', label: 'Basis', kind: 'text', width: 'min-w-28' },
            { key: 'averagingMinutes', label: 'Averaged over', unit: 'min', kind: 'number', width: 'min-w-28', zeroWords: 'momentary' },
            { key: 'source', label: 'Source', kind: 'text', width: 'min-w-56', isWide: true },
          ]}
        />
      </Section>
      <NotesSection />
    </>
  );
}
