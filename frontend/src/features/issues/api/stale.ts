/** What a change of one issue makes stale. */
export const STALE = ['readIssue', 'listIssues', 'countIssues', 'readHistory', 'readDaySheet'] as const;
