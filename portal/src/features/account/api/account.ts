import { queryOptions } from '@tanstack/react-query';
import type { CodeSent, Me } from '@tallypole/shared/schemas/auth';
import type { Account, RecoveryCodes, SecondStepKey } from '@tallypole/shared/schemas/auth-account';
import { get, post } from '../../../lib/http.ts';

export const accountQuery = queryOptions({ queryKey: ['me', 'account'], queryFn: ({ signal }) => get<Account>('me/account', signal) });

export const setName = (name: string): Promise<Me> => post('me/name', { name });
export const setPassword = (password: string): Promise<Account> => post('me/password', { password });
export const removePassword = (): Promise<Account> => post('me/password/remove', {});
export const startSecondStep = (): Promise<SecondStepKey> => post('me/second-step', {});
export const confirmSecondStep = (code: string): Promise<RecoveryCodes> => post('me/second-step/confirm', { code });
export const newRecoveryCodes = (): Promise<RecoveryCodes> => post('me/second-step/recovery-codes', {});
export const removeSecondStep = (): Promise<Account> => post('me/second-step/remove', {});
export const endSession = (id: string): Promise<Account> => post(`me/sessions/${id}/end`, {});
export const endOtherSessions = (): Promise<Account> => post('me/sessions/end-others', {});
export const askForAddress = (email: string): Promise<CodeSent> => post('me/address/codes', { email });
export const changeAddress = (code: string): Promise<Me> => post('me/address', { code });
export const undoAddress = (token: string): Promise<{ email: string }> => post('auth/address/undo', { token });
