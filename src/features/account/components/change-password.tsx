import { zodResolver } from '@hookform/resolvers/zod';
import { useState } from 'react';
import { useForm } from 'react-hook-form';
import type { z } from 'zod';
import { passwordChangeSchema } from '../../../../shared/schemas/people';
import { Button } from '../../../components/button';
import { Field } from '../../../components/field';
import { Notice } from '../../../components/notice';
import { placeErrors } from '../../../lib/form-errors';
import { useChangePassword } from '../api';
import { PasswordInput } from './password-input';

export function ChangePassword({ email }: { email: string }) {
  const change = useChangePassword();
  const [failure, setFailure] = useState<string | null>(null);
  const { register, handleSubmit, setError, reset, formState } = useForm<z.infer<typeof passwordChangeSchema>>({ resolver: zodResolver(passwordChangeSchema), defaultValues: { currentPassword: '', newPassword: '' } });
  const { errors } = formState;
  const submit = handleSubmit(async (input) => {
    setFailure(null);
    try {
      await change.mutateAsync(input);
      reset();
    } catch (error) {
      setFailure(placeErrors(error, setError, ['currentPassword', 'newPassword']));
    }
  });
  return (
    <form onSubmit={(event) => void submit(event)} className="flex max-w-xl flex-col gap-5 pt-5" noValidate>
      {change.isSuccess && !formState.isDirty && (
        <Notice tone="good" title="Your password is changed">
          Your other sessions have ended. A mail tells you that it was changed.
        </Notice>
      )}
      {failure && (
        <Notice tone="bad" title="The password was not changed">
          {failure}
        </Notice>
      )}
      <input type="email" name="username" autoComplete="username" value={email} readOnly hidden />
      <Field label="Present password" error={errors.currentPassword && (errors.currentPassword.type === 'server' ? errors.currentPassword.message : 'Give your present password')}>
        <PasswordInput {...register('currentPassword')} autoComplete="current-password" />
      </Field>
      <Field label="New password" hint="At least 12 characters. Three or four words that do not belong together are easy to keep and hard to guess." error={errors.newPassword?.message}>
        <PasswordInput {...register('newPassword')} autoComplete="new-password" />
      </Field>
      <div>
        <Button type="submit" isBusy={change.isPending}>
          Change password
        </Button>
      </div>
    </form>
  );
}
