import { useChange } from '../../../lib/query.js';
import { named, type IssueName } from '../../../lib/issue-name.js';

/** Notes that the reader has seen the issue as it stands. */
export const useLookAtIssue = (name: IssueName) => useChange('lookAtIssue', () => ({ params: named(name) }), ['readDaySheet']);
