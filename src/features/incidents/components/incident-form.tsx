import { zodResolver } from '@hookform/resolvers/zod';
import { useState } from 'react';
import { Controller, useForm, type FieldPath } from 'react-hook-form';
import { incidentCreateSchema } from '../../../../shared/schemas/incidents';
import { Button } from '../../../components/button';
import { Field } from '../../../components/field';
import { ChoiceInput, TextArea, TextInput } from '../../../components/inputs';
import { Notice } from '../../../components/notice';
import { placeErrors } from '../../../lib/form-errors';
import type { IncidentCreate } from '../api';
import { markingChoices } from '../marking-choices';

const fields: readonly FieldPath<IncidentCreate>[] = ['name', 'marking', 'summary', 'utcOffset'];

type IncidentFormProps = {
  start: IncidentCreate;
  /** The marking stays for good: it is asked only when an incident is opened. */
  hasMarking: boolean;
  submitLabel: string;
  onSubmit: (input: IncidentCreate) => Promise<void>;
  onCancel: () => void;
};

export function IncidentForm({ start, hasMarking, submitLabel, onSubmit, onCancel }: IncidentFormProps) {
  const { register, control, handleSubmit, setError, formState } = useForm<IncidentCreate>({ resolver: zodResolver(incidentCreateSchema), defaultValues: start });
  const [failure, setFailure] = useState<string | null>(null);
  const { errors, isSubmitting } = formState;
  const submit = handleSubmit(async (input) => {
    setFailure(null);
    try {
      await onSubmit(input);
    } catch (error) {
      setFailure(placeErrors(error, setError, fields));
    }
  });
  return (
    <form onSubmit={(event) => void submit(event)} className="flex flex-col gap-5" noValidate>
      {failure && (
        <Notice tone="bad" title="This was not saved">
          {failure}
        </Notice>
      )}
      <Field label="Name" hint="What and where, as people will say it on the telephone: Tanker at V2 bridge" error={errors.name?.message}>
        <TextInput {...register('name')} />
      </Field>
      {hasMarking && (
        <Field label="Marking" hint="Stands on every page and mail of this incident, for good." error={errors.marking?.message} isGroup>
          <Controller control={control} name="marking" render={({ field }) => <ChoiceInput label="Marking" name="marking" value={field.value} onChange={field.onChange} choices={markingChoices} />} />
        </Field>
      )}
      <Field label="Times shown in" unit="UTC offset" hint="As +hh:mm or -hh:mm" error={errors.utcOffset?.message}>
        <TextInput {...register('utcOffset')} className="w-28!" autoComplete="off" />
      </Field>
      <Field label="Summary" isOptional error={errors.summary?.message}>
        <TextArea {...register('summary')} rows={3} />
      </Field>
      <div className="flex flex-wrap gap-3">
        <Button type="submit" kind="primary" isBusy={isSubmitting}>
          {submitLabel}
        </Button>
        <Button kind="quiet" onClick={onCancel}>
          Cancel
        </Button>
      </div>
    </form>
  );
}
