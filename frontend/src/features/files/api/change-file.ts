import type { Reach } from '#shared/vocabulary';
import { useChange } from '../../../lib/query.js';

/** Narrows who a file reaches; it can never be widened again here. */
export const useChangeFile = (fileId: string) =>
  useChange('changeFile', (reach: Reach) => ({ params: { fileId }, body: { reach } }), ['readIssue', 'readFile', 'readHistory']);
