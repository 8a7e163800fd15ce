import type { NewParty } from '#shared/api/people';
import { useChange } from '../../../lib/query.js';

export const useAddParty = (programme: string) => useChange('addParty', (body: NewParty) => ({ params: { programme }, body }), ['readProgramme']);
