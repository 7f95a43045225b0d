import { zodResolver } from '@hookform/resolvers/zod';
import { useState } from 'react';
import { useForm } from 'react-hook-form';
import { Link } from 'react-router-dom';
import { passwordForgottenSchema } from '../../../../shared/schemas/people';
import { Button, ButtonLink } from '../../../components/button';
import { Field } from '../../../components/field';
import { TextInput } from '../../../components/inputs';
import { Notice } from '../../../components/notice';
import { placeErrors } from '../../../lib/form-errors';
import { useSession } from '../../../lib/session';
import { useForgetPassword } from '../api';
import { VisitorPage } from '../components/visitor-page';

export function ForgottenPasswordPage() {
  const session = useSession();
  const forget = useForgetPassword();
  const [failure, setFailure] = useState<string | null>(null);
  const { register, handleSubmit, setError, getValues, formState } = useForm<{ email: string }>({ resolver: zodResolver(passwordForgottenSchema), defaultValues: { email: '' } });
  const ask = handleSubmit(async (input) => {
    setFailure(null);
    try {
      await forget.mutateAsync(input);
    } catch (error) {
      setFailure(placeErrors(error, setError, ['email']));
    }
  });
  return (
    <VisitorPage title="Forgotten password" above={session?.organisation}>
      {forget.isSuccess ? (
        <div className="flex flex-col items-start gap-5 pt-6">
          <Notice tone="note" title="Look into your mail">
            If {getValues('email').trim()} is known here, a link is on its way. It works once, for one hour; the newest one counts. Nothing in the inbox after a few minutes: look under unwanted mail, then ask your administrator.
            {session?.isDemo && ' In the demonstration no mail leaves unless a mail server is set: sign in as administrator and look into the outbox.'}
          </Notice>
          <ButtonLink to="/sign-in">Back to sign-in</ButtonLink>
        </div>
      ) : (
        <form onSubmit={(event) => void ask(event)} className="flex flex-col gap-5 pt-6" noValidate>
          <p className="text-ink2">Give the e-mail you sign in with. A link to choose a new password will be sent there.</p>
          {failure && (
            <Notice tone="bad" title="No link was asked for">
              {failure}
            </Notice>
          )}
          <Field label="E-mail" error={formState.errors.email?.message}>
            <TextInput {...register('email')} type="email" autoComplete="username" autoFocus />
          </Field>
          <div className="flex flex-wrap items-center gap-x-6 gap-y-3">
            <Button type="submit" kind="primary" isBusy={forget.isPending}>
              Send link
            </Button>
            <Link to="/sign-in" className="inline-flex min-h-10 items-center text-kingfisher underline underline-offset-2">
              Back to sign-in
            </Link>
          </div>
        </form>
      )}
    </VisitorPage>
  );
}
