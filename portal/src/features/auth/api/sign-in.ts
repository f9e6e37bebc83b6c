import type { CodeSent, Me, SecondStepAsked } from '@tallypole/shared/schemas/auth';
import { post } from '../../../lib/http.ts';

/** Who came in, or that their second step is waited for. */
export type Arrived = Me | SecondStepAsked;

export const askForCode = (email: string): Promise<CodeSent> => post('auth/codes', { email });
export const signIn = (email: string, code: string): Promise<Arrived> => post('auth/sessions', { email, code });
export const signInByPassword = (email: string, password: string): Promise<Arrived> => post('auth/sessions/by-password', { email, password });
export const giveSecondStep = (code: string): Promise<Me> => post('auth/sessions/second-step', { code });
export const setName = (name: string): Promise<Me> => post('me/name', { name });
