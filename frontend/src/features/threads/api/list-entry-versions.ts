import { reading } from '../../../lib/query.js';
import { named, type IssueName } from '../../../lib/issue-name.js';

export const listEntryVersions = (name: IssueName, entryId: string) => reading('listEntryVersions', { params: { ...named(name), entryId } });
