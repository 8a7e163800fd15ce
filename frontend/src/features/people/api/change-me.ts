import type { ChangeMe } from '#shared/api/people';
import { useChange } from '../../../lib/query.js';

export const useChangeMe = () => useChange('changeMe', (body: ChangeMe) => ({ body }), ['readMe']);
