import type { z } from 'zod';
import type { newDecode } from '#shared/api/decodes';
import { useChange } from '../../../lib/query.js';
import { named, type IssueName } from '../../../lib/issue-name.js';

export const useRequestDecode = (name: IssueName) =>
  useChange('requestDecode', (body: z.input<typeof newDecode>) => ({ params: named(name), body }), ['readIssue', 'readHistory', 'readDaySheet']);
