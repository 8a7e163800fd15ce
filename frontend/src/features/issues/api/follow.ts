import { useChange } from '../../../lib/query.js';
import { named, type IssueName } from '../../../lib/issue-name.js';

export const useFollow = (name: IssueName) => useChange('follow', () => ({ params: named(name) }), ['readIssue']);
export const useUnfollow = (name: IssueName) => useChange('unfollow', () => ({ params: named(name) }), ['readIssue']);
