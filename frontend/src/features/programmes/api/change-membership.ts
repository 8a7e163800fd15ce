import type { Role } from '#shared/vocabulary';
import { useChange } from '../../../lib/query.js';

/** Another role, or the end of the membership. */
export const useChangeMembership = (programme: string) =>
  useChange('changeMembership', ({ membershipId, ...body }: { membershipId: string; role?: Role; leave?: true }) => ({ params: { programme, membershipId }, body }), ['readProgramme', 'readMe']);
