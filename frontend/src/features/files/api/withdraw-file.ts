import { useChange } from '../../../lib/query.js';

/** Takes a file's bytes and what was read from it away; a tombstone stays. */
export const useWithdrawFile = (fileId: string) =>
  useChange('withdrawFile', () => ({ params: { fileId } }), ['readIssue', 'readDecode', 'readHistory']);
