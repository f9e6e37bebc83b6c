import { queryOptions, useQuery } from '@tanstack/react-query';
import type { Me } from '@tallypole/shared/schemas/auth';
import { keepOnlyFor } from './drafts.ts';
import { get } from './http.ts';
import { queryClient } from './query-client.ts';

export const meQuery = queryOptions({
  queryKey: ['me'],
  queryFn: async ({ signal }) => {
    const me = await get<Me>('me', signal);
    keepOnlyFor(me.person.id);
    return me;
  },
  staleTime: 60_000,
});

/** Somebody signed in here; what was loaded or typed by anybody else in this tab goes. */
export function enter(me: Me): void {
  if (keepOnlyFor(me.person.id)) queryClient.clear();
  queryClient.setQueryData(meQuery.queryKey, me);
}

/** Who is signed in; only below <SignedIn>, which waits for it. */
export function useMe(): Me {
  const { data } = useQuery(meQuery);
  if (!data) throw new Error('Nobody is signed in here.');
  return data;
}
