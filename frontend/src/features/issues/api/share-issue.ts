import { useChange } from '../../../lib/query.js';
import { named, type IssueName } from '../../../lib/issue-name.js';
import { STALE } from './stale.js';

/** Shows the issue to one more party. */
export const useShareIssue = (name: IssueName) =>
  useChange('shareIssue', (partyId: string) => ({ params: named(name), body: { partyId } }), STALE);
