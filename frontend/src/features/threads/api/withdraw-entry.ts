import { useChange } from '../../../lib/query.js';
import { named, type IssueName } from '../../../lib/issue-name.js';

/** Takes an entry's words away; that something stood there stays. */
export const useWithdrawEntry = (name: IssueName, entryId: string) =>
  useChange('withdrawEntry', () => ({ params: { ...named(name), entryId } }), ['listEntries', 'readHistory']);
