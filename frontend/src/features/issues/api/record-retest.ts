import type { NewRetest } from '#shared/api/issues';
import { useChange } from '../../../lib/query.js';
import { named, type IssueName } from '../../../lib/issue-name.js';
import { STALE } from './stale.js';

/** Records a retest on named builds. */
export const useRecordRetest = (name: IssueName) =>
  useChange('recordRetest', (body: NewRetest) => ({ params: named(name), body }), STALE);
