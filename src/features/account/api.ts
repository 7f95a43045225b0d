import { queryOptions, useMutation, useQueryClient } from '@tanstack/react-query';
import type { z } from 'zod';
import { apiPaths } from '../../../shared/api-paths';
import type { PasswordLinkAnswer, passwordChangeSchema, passwordForgottenSchema, passwordSetSchema, Session, signInSchema } from '../../../shared/schemas/people';
import { api } from '../../lib/api-client';
import { sessionQuery } from '../../lib/session';

export type SignIn = z.input<typeof signInSchema>;

/** Asked with POST, so that the token stays out of addresses and logs. */
export const passwordLinkQuery = (token: string) =>
  queryOptions({ queryKey: ['password-link', token], queryFn: ({ signal }) => api.post<PasswordLinkAnswer>(apiPaths.passwordLink, { token }, { signal }), staleTime: Infinity, gcTime: 0, refetchOnWindowFocus: false });

export function useSignIn() {
  const client = useQueryClient();
  return useMutation({ mutationFn: (body: SignIn) => api.post<Session>(apiPaths.signIn, body), onSuccess: (session) => client.setQueryData(sessionQuery.queryKey, session) });
}

export const useForgetPassword = () => useMutation({ mutationFn: (body: z.input<typeof passwordForgottenSchema>) => api.post<undefined>(apiPaths.passwordForgotten, body) });
export const useSetPassword = () => useMutation({ mutationFn: (body: z.input<typeof passwordSetSchema>) => api.post<{ email: string }>(apiPaths.passwordSet, body) });
export const useChangePassword = () => useMutation({ mutationFn: (body: z.input<typeof passwordChangeSchema>) => api.post<undefined>(apiPaths.passwordChange, body) });

/** Nothing read under the old session stays in this page. */
export function useSignOutEverywhere() {
  const client = useQueryClient();
  return useMutation({ mutationFn: () => api.post<undefined>(apiPaths.signOutEverywhere), onSuccess: () => client.clear() });
}
