import { useChange } from '../../../lib/query.js';

export const useRevokeInvitation = (programme: string) =>
  useChange('revokeInvitation', (invitationId: string) => ({ params: { programme, invitationId } }), ['readProgramme']);
