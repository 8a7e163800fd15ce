import type { NewInvitation } from '#shared/api/people';
import { useChange } from '../../../lib/query.js';

/** The answer carries the invitation's link, once. */
export const useInvite = (programme: string) => useChange('invite', (body: NewInvitation) => ({ params: { programme }, body }), ['readProgramme']);
