import type { z } from 'zod';
import type { newEntry } from '#shared/api/thread';
import { useChange } from '../../../lib/query.js';
import { named, type IssueName } from '../../../lib/issue-name.js';

export const useWriteEntry = (name: IssueName) =>
  useChange('writeEntry', (body: z.input<typeof newEntry>) => ({ params: named(name), body }), ['listEntries', 'readIssue', 'readHistory']);
