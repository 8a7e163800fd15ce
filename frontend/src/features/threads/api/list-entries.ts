import { reading } from '../../../lib/query.js';
import { named, type IssueName } from '../../../lib/issue-name.js';

export const listEntries = (name: IssueName) => reading('listEntries', { params: named(name) });
