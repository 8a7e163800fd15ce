import type { NewNextMove } from '#shared/api/issues';
import { useChange } from '../../../lib/query.js';
import { named, type IssueName } from '../../../lib/issue-name.js';
import { STALE } from './stale.js';

/** Names the party that everyone waits for. */
export const useSetNextMove = (name: IssueName) =>
  useChange('setNextMove', (body: NewNextMove) => ({ params: named(name), body }), STALE);
