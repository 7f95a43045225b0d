import { zodResolver } from '@hookform/resolvers/zod';
import { useState } from 'react';
import { useForm } from 'react-hook-form';
import { Link, Navigate, useLocation, useSearchParams } from 'react-router-dom';
import { signInSchema } from '../../../../shared/schemas/people';
import { Button } from '../../../components/button';
import { Field } from '../../../components/field';
import { TextInput } from '../../../components/inputs';
import { Notice } from '../../../components/notice';
import { placeErrors } from '../../../lib/form-errors';
import { useSession } from '../../../lib/session';
import { useSignIn, type SignIn } from '../api';
import { DemoSignIns } from '../components/demo-sign-ins';
import { PasswordInput } from '../components/password-input';
import { VisitorPage } from '../components/visitor-page';
import { safeNext } from '../safe-next';

export function SignInPage() {
  const session = useSession();
  const [address] = useSearchParams();
  const { email = '', isPasswordSet = false } = (useLocation().state ?? {}) as { email?: string; isPasswordSet?: boolean };
  const signIn = useSignIn();
  const [failure, setFailure] = useState<string | null>(null);
  const form = useForm<SignIn>({ resolver: zodResolver(signInSchema), defaultValues: { email, password: '' } });
  const { errors } = form.formState;

  const enter = async (input: SignIn) => {
    setFailure(null);
    try {
      await signIn.mutateAsync(input);
    } catch (error) {
      setFailure(placeErrors(error, form.setError, ['email', 'password']));
    }
  };
  if (session?.person) return <Navigate to={safeNext(address.get('next'))} replace />;
  return (
    <VisitorPage title="Sign in" above={session?.organisation}>
      <form onSubmit={(event) => void form.handleSubmit(enter)(event)} className="flex flex-col gap-5 pt-6" noValidate>
        {isPasswordSet && !failure && (
          <Notice tone="good" title="Your password is set">
            Sign in with it.
          </Notice>
        )}
        {failure && (
          <Notice tone="bad" title="You are not signed in">
            {failure}
          </Notice>
        )}
        <Field label="E-mail" error={errors.email?.message}>
          <TextInput {...form.register('email')} type="email" autoComplete="username" autoFocus={!email} />
        </Field>
        <Field label="Password" error={errors.password?.message}>
          <PasswordInput {...form.register('password')} autoComplete="current-password" autoFocus={!!email} />
        </Field>
        <div className="flex flex-wrap items-center gap-x-6 gap-y-3">
          <Button type="submit" kind="primary" isBusy={signIn.isPending}>
            Sign in
          </Button>
          <Link to="/forgotten-password" className="inline-flex min-h-10 items-center text-kingfisher underline underline-offset-2">
            Forgotten password
          </Link>
        </div>
      </form>
      {session && session.demoSignIns.length > 0 && <DemoSignIns people={session.demoSignIns} isBusy={signIn.isPending} onChoose={(input) => void enter(input)} />}
      <p className="pt-10 text-note text-ink2">Accounts are given by the administrator of this installation{session ? `. Downreach ${session.productVersion}.` : '.'}</p>
    </VisitorPage>
  );
}
