import { reading } from '../../../lib/query.js';
import { named, type IssueName } from '../../../lib/issue-name.js';

export const readIssue = (name: IssueName) => reading('readIssue', { params: named(name) });
