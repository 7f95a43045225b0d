import { FormProvider, useForm, type FieldValues } from 'react-hook-form';
import type { RegisterName } from '../../../../shared/schemas/registers';
import type { EntryValues } from '../model/empty-entry';
import { EntryFields } from './entry-fields';
import { EntryModeContext } from './entry-mode';

/** An entry as it is stored, to be read. Give it a key that changes with the version. */
export function EntryReading({ register, values }: { register: RegisterName; values: EntryValues }) {
  const form = useForm<FieldValues>({ defaultValues: values });
  return (
    <EntryModeContext value="read">
      <FormProvider {...form}>
        <EntryFields register={register} isNew={false} />
      </FormProvider>
    </EntryModeContext>
  );
}
