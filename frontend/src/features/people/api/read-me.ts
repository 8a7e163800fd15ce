import { queryOptions } from '@tanstack/react-query';
import type { Me } from '#shared/api/people';
import { call } from '../../../lib/call.js';
import { statusOf } from '../../../lib/refusal.js';

/** The signed-in person, or null where nobody is signed in. */
export const readMe = () => queryOptions({
  queryKey: ['readMe', null, null] as const,
  staleTime: 60_000,
  queryFn: async ({ signal }): Promise<Me | null> => {
    try { return await call('readMe', {}, signal); } catch (error) {
      if (statusOf(error) === 401) return null;
      throw error;
    }
  },
});
