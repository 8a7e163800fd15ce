import type { ChangeIssue } from '#shared/api/issues';
import { useChange } from '../../../lib/query.js';
import { named, type IssueName } from '../../../lib/issue-name.js';
import { STALE } from './stale.js';

/** Corrects what the issue says; the version guards against overwriting a colleague. */
export const useChangeIssue = (name: IssueName) =>
  useChange('changeIssue', (body: ChangeIssue) => ({ params: named(name), body }), STALE);
