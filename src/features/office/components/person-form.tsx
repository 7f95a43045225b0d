import { zodResolver } from '@hookform/resolvers/zod';
import { useState } from 'react';
import { Controller, useForm, type FieldPath } from 'react-hook-form';
import { type Role, roles, roleWords } from '../../../../shared/permissions';
import { personCreateSchema } from '../../../../shared/schemas/people';
import { Button } from '../../../components/button';
import { Field } from '../../../components/field';
import { CheckInput, TextInput } from '../../../components/inputs';
import { Notice } from '../../../components/notice';
import { placeErrors } from '../../../lib/form-errors';
import type { PersonInput } from '../api';

const fields: readonly FieldPath<PersonInput>[] = ['name', 'email', 'roles', 'phone', 'licenceNumber'];

type PersonFormProps = {
  start: PersonInput;
  /** The e-mail is what a person signs in with: it is given once. */
  hasEmail: boolean;
  submitLabel: string;
  onSubmit: (input: PersonInput) => Promise<void>;
  onCancel: () => void;
};

export function PersonForm({ start, hasEmail, submitLabel, onSubmit, onCancel }: PersonFormProps) {
  const { register, control, handleSubmit, setError, formState } = useForm<PersonInput>({ resolver: zodResolver(personCreateSchema), defaultValues: start });
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
      <Field label="Name" error={errors.name?.message}>
        <TextInput {...register('name')} autoComplete="off" />
      </Field>
      {hasEmail && (
        <Field label="E-mail" hint="The invitation goes there, and the person signs in with it." error={errors.email?.message}>
          <TextInput {...register('email')} type="email" autoComplete="off" />
        </Field>
      )}
      <Field label="Roles" error={errors.roles?.message} isGroup>
        <Controller control={control} name="roles" render={({ field }) => <RolesInput value={field.value} onChange={field.onChange} />} />
      </Field>
      <div className="grid gap-5 sm:grid-cols-2">
        <Field label="Telephone" isOptional error={errors.phone?.message}>
          <TextInput {...register('phone')} autoComplete="off" />
        </Field>
        <Field label="Licence number" isOptional hint="Printed beside the name where work must be signed." error={errors.licenceNumber?.message}>
          <TextInput {...register('licenceNumber')} autoComplete="off" />
        </Field>
      </div>
      <div className="flex flex-wrap gap-3 border-t border-rule pt-4">
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

function RolesInput({ value, onChange }: { value: readonly Role[]; onChange: (value: Role[]) => void }) {
  const turn = (role: Role, isHeld: boolean) => onChange(roles.filter((known) => (known === role ? isHeld : value.includes(known))));
  return (
    <div className="border-y border-rule">
      {roles.map((role) => (
        <CheckInput key={role} label={<span className="font-semibold">{roleWords[role].title}</span>} hint={roleWords[role].does} checked={value.includes(role)} onChange={(event) => turn(role, event.target.checked)} className="border-b border-rule last:border-b-0" />
      ))}
    </div>
  );
}
