import { post } from '../../../lib/http.ts';

export const signOut = (): Promise<void> => post('auth/sign-out', {});
