import { queryOptions } from '@tanstack/react-query';
import type { AllWaits } from '@tallypole/shared/schemas/house';
import { get } from '../../../lib/http.ts';

export const waitsQuery = queryOptions({ queryKey: ['waits'], queryFn: ({ signal }) => get<AllWaits>('waits', signal), refetchInterval: 60_000 });
