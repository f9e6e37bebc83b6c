import { queryOptions, useQuery } from '@tanstack/react-query';
import type { Me } from '@tallypole/shared/schemas/auth';
import { get } from './http.ts';

export const meQuery = queryOptions({ queryKey: ['me'], queryFn: ({ signal }) => get<Me>('me', signal), staleTime: 60_000 });

/** Who is signed in; only below <SignedIn>, which waits for it. */
export function useMe(): Me {
  const { data } = useQuery(meQuery);
  if (!data) throw new Error('Nobody is signed in here.');
  return data;
}
