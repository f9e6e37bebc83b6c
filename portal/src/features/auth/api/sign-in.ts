import type { CodeSent, Me } from '@tallypole/shared/schemas/auth';
import { post } from '../../../lib/http.ts';

export const askForCode = (email: string): Promise<CodeSent> => post('auth/codes', { email });
export const signIn = (email: string, code: string): Promise<Me> => post('auth/sessions', { email, code });
export const setName = (name: string): Promise<Me> => post('me/name', { name });
