import { zodResolver } from '@hookform/resolvers/zod';
import { useQuery } from '@tanstack/react-query';
import { useState } from 'react';
import { useForm } from 'react-hook-form';
import { useNavigate, useParams } from 'react-router-dom';
import { z } from 'zod';
import { instantMs } from '../../../../shared/civil';
import { formatClockOffset } from '../../../../shared/format';
import { newPasswordSchema, type PasswordLinkAnswer } from '../../../../shared/schemas/people';
import { Button, ButtonLink } from '../../../components/button';
import { Field } from '../../../components/field';
import { Notice } from '../../../components/notice';
import { Loading } from '../../../components/progress-text';
import { ApiError } from '../../../lib/api-client';
import { errorText, placeErrors } from '../../../lib/form-errors';
import { useDefaultOffset, useSession } from '../../../lib/session';
import { passwordLinkQuery, useSetPassword } from '../api';
import { PasswordInput } from '../components/password-input';
import { VisitorPage } from '../components/visitor-page';

export function SetPasswordPage() {
  const { token = '' } = useParams();
  const session = useSession();
  const { data: link, error } = useQuery(passwordLinkQuery(token));
  return (
    <VisitorPage title="Choose your password" above={session?.organisation}>
      {!link && !error && <Loading what="the link" />}
      {error && <LinkFailure error={error} />}
      {link && <SetPasswordForm token={token} link={link} />}
    </VisitorPage>
  );
}

function LinkFailure({ error }: { error: Error }) {
  const isBroken = error instanceof ApiError && (error.is('link-used-or-expired') || error.is('bad-input'));
  return (
    <div className="flex flex-col items-start gap-5 pt-6">
      <Notice tone="bad" title={isBroken ? 'This link has been used or has expired' : 'The link cannot be checked'}>
        {isBroken ? 'A link works once and for a limited time, and a newer one replaces it. Ask for another; the newest mail counts.' : errorText(error)}
      </Notice>
      <div className="flex flex-wrap gap-3">
        <ButtonLink to="/forgotten-password" kind="primary">
          Ask for a new link
        </ButtonLink>
        <ButtonLink to="/sign-in">Back to sign-in</ButtonLink>
      </div>
    </div>
  );
}

const formSchema = z.object({ newPassword: newPasswordSchema });

function SetPasswordForm({ token, link }: { token: string; link: PasswordLinkAnswer }) {
  const set = useSetPassword();
  const navigate = useNavigate();
  const offset = useDefaultOffset();
  const [failure, setFailure] = useState<unknown>(null);
  const { register, handleSubmit, setError, formState } = useForm<z.infer<typeof formSchema>>({ resolver: zodResolver(formSchema), defaultValues: { newPassword: '' } });
  const submit = handleSubmit(async ({ newPassword }) => {
    setFailure(null);
    try {
      const { email } = await set.mutateAsync({ token, newPassword });
      await navigate('/sign-in', { replace: true, state: { email, isPasswordSet: true } });
    } catch (error) {
      if (placeErrors(error, setError, ['newPassword']) !== null) setFailure(error);
    }
  });
  if (failure instanceof Error && failure instanceof ApiError && failure.is('link-used-or-expired')) return <LinkFailure error={failure} />;
  return (
    <form onSubmit={(event) => void submit(event)} className="flex flex-col gap-5 pt-6" noValidate>
      <p className="text-ink2">
        {link.purpose === 'invitation' ? `Welcome, ${link.name}. ` : `${link.name}, `}
        {link.purpose === 'invitation' ? 'You' : 'you'} will sign in as <span className="font-semibold text-ink">{link.email}</span>. The link works until {formatClockOffset(instantMs(link.expiresAt), offset)}.
      </p>
      {failure !== null && (
        <Notice tone="bad" title="The password was not set">
          {errorText(failure)}
        </Notice>
      )}
      {/* Password keepers store the password under this name. */}
      <input type="email" name="username" autoComplete="username" value={link.email} readOnly hidden />
      <Field label="New password" hint="At least 12 characters. Three or four words that do not belong together are easy to keep and hard to guess." error={formState.errors.newPassword?.message}>
        <PasswordInput {...register('newPassword')} autoComplete="new-password" autoFocus />
      </Field>
      <div>
        <Button type="submit" kind="primary" isBusy={set.isPending}>
          Set password
        </Button>
      </div>
    </form>
  );
}
