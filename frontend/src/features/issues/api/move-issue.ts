import type { NewMove } from '#shared/api/issues';
import { useChange } from '../../../lib/query.js';
import { named, type IssueName } from '../../../lib/issue-name.js';
import { STALE } from './stale.js';

/** Moves the stage. */
export const useMoveIssue = (name: IssueName) =>
  useChange('moveIssue', (body: NewMove) => ({ params: named(name), body }), STALE);
