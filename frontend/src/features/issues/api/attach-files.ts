import { useChange } from '../../../lib/query.js';
import { named, type IssueName } from '../../../lib/issue-name.js';
import { STALE } from './stale.js';

/** Puts uploaded files on the issue. */
export const useAttachFiles = (name: IssueName) =>
  useChange('attachFiles', (fileIds: string[]) => ({ params: named(name), body: { fileIds } }), STALE);
