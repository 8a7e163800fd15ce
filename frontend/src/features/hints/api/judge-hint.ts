import type { NewHintVerdict } from '#shared/api/decodes';
import { useChange } from '../../../lib/query.js';

/** Confirms or refutes a hint, on the record. */
export const useJudgeHint = (hintId: string) =>
  useChange('judgeHint', (body: NewHintVerdict) => ({ params: { hintId }, body }), ['readIssue', 'readDecode', 'readHistory']);
