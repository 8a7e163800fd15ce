import { useChange } from '../../../lib/query.js';
import { named, type IssueName } from '../../../lib/issue-name.js';

/** Writes a new version of an entry; the older ones stay readable. */
export const useChangeEntry = (name: IssueName, entryId: string) =>
  useChange('changeEntry', (body: string) => ({ params: { ...named(name), entryId }, body: { body } }), ['listEntries', 'listEntryVersions']);
