import type { z } from 'zod';
import type { newUnit } from '#shared/api/links';
import { useChange } from '../../../lib/query.js';

export const useAddUnit = () => useChange('addUnit', (body: z.input<typeof newUnit>) => ({ body }), ['listUnits']);
