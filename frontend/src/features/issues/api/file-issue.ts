import type { z } from 'zod';
import type { newIssue } from '#shared/api/issues';
import { useChange } from '../../../lib/query.js';

export type NewIssueInput = z.input<typeof newIssue>;

export const useFileIssue = () => useChange('fileIssue', (body: NewIssueInput) => ({ body }), ['listIssues', 'countIssues', 'readDaySheet']);
