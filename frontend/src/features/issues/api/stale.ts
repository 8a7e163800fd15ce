/** What a change of one issue makes stale. */
export const STALE = ['readIssue', 'listIssues', 'readHistory', 'readDaySheet'] as const;
