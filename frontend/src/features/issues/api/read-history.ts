import { reading } from '../../../lib/query.js';
import { named, type IssueName } from '../../../lib/issue-name.js';

export const readHistory = (name: IssueName) => reading('readHistory', { params: named(name) });
