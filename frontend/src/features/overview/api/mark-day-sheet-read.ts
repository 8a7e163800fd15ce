import { useChange } from '../../../lib/query.js';

/** From now on only later changes count as new. */
export const useMarkDaySheetRead = () => useChange('markDaySheetRead', () => ({}), ['readDaySheet', 'listIssues']);
