import type { z } from 'zod';
import type { newBuild } from '#shared/api/links';
import { useChange } from '../../../lib/query.js';

export const useAddBuild = () => useChange('addBuild', (body: z.input<typeof newBuild>) => ({ body }), ['listUnits', 'readLink', 'listLinks']);
