import { useChange } from '../../../lib/query.js';
import { named, type IssueName } from '../../../lib/issue-name.js';
import { STALE } from './stale.js';

/** Signs a waiver for the reader's own party. */
export const useSignWaiver = (name: IssueName) =>
  useChange('signWaiver', (waiverId: string) => ({ params: { ...named(name), waiverId } }), STALE);
