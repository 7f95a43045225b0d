import type { RegisterName } from '../../../../shared/schemas/registers';
import { FieldGrid, TextField } from './bound-fields';
import { DayField } from './day-field';
import { useIsWriting } from './entry-mode';
import { ReceptorFields } from './receptor-fields';
import { SourceFields } from './source-fields';
import { StationFields } from './station-fields';
import { SubstanceFields } from './substance-fields';
import { WaterFields } from './water-fields';

/** All fields of an entry: what every register keeps, then what this one does. */
export function EntryFields({ register, isNew }: { register: RegisterName; isNew: boolean }) {
  return (
    <>
      <HeadFields />
      {register === 'waters' && <WaterFields isNew={isNew} />}
      {register === 'receptors' && <ReceptorFields />}
      {register === 'sources' && <SourceFields />}
      {register === 'substances' && <SubstanceFields />}
      {register === 'stations' && <StationFields />}
    </>
  );
}

function HeadFields() {
  const isWriting = useIsWriting();
  return (
    <FieldGrid className="pt-6!">
      {isWriting && <TextField name="code" label="Code" hint="Short, as it stands on the map: INT-1" />}
      {isWriting && <TextField name="name" label="Name" className="lg:col-span-2" />}
      {!isWriting && <TextField name="code" label="Code" />}
      <TextField name="ownerName" label="Owner" hint="Who keeps this entry right" isOptional />
      <DayField name="lastCheckedOn" label="Last checked" hint="The day somebody last held it against the facts" />
    </FieldGrid>
  );
}
