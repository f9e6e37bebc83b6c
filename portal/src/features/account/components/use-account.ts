import { useQueryClient } from '@tanstack/react-query';
import type { Account } from '@tallypole/shared/schemas/auth-account';
import { meQuery } from '../../../lib/me.ts';
import { toast } from '../../../ui/toast.ts';
import { accountQuery } from '../api/account.ts';

/** What an act answered is shown at once, and said. */
export function useAccountDone(): (message?: string) => (account: Account) => void {
  const queries = useQueryClient();
  return (message) => (account) => {
    queries.setQueryData(accountQuery.queryKey, account);
    void queries.invalidateQueries({ queryKey: meQuery.queryKey, exact: true });
    if (message) toast(message);
  };
}

/** People have no zone of their own here: moments stand in the browser's. */
export const browserZone = (): string => Intl.DateTimeFormat().resolvedOptions().timeZone;
