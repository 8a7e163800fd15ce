import type { z } from 'zod';
import type { newLink } from '#shared/api/links';
import { useChange } from '../../../lib/query.js';

export const useAddLink = () => useChange('addLink', (body: z.input<typeof newLink>) => ({ body }), ['listLinks']);
