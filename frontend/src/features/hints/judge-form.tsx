import { useState, type FormEvent } from 'react';
import type { IssueHint } from '#shared/api/decodes';
import { TextArea } from '../../components/ui/field.js';
import { OpenedForm } from '../../components/ui/opened-form.js';
import { Refused } from '../../components/ui/refused.js';
import { useJudgeHint } from './api/judge-hint.js';

/** A verdict on a hint goes on the record under the reader's name. */
export function JudgeForm({ hint, verdict, close }: { hint: IssueHint; verdict: 'confirmed' | 'refuted'; close: () => void }) {
  const change = useJudgeHint(hint.id);
  const [reason, setReason] = useState('');
  const refutes = verdict === 'refuted';
  const send = (e: FormEvent): void => {
    e.preventDefault();
    change.mutate({ verdict, reason }, { onSuccess: close });
  };
  return (
    <OpenedForm className="judge-form" onSubmit={send}>
      <TextArea label={refutes ? 'What speaks against it' : 'What confirms it (may be left out)'} required={refutes} maxLength={2000} value={reason} onChange={(e) => setReason(e.target.value)} />
      <Refused error={change.error} />
      <div className="actions">
        <button type="submit" className="button button-main" disabled={change.isPending}>{refutes ? 'Refute the hint' : 'Confirm the hint'}</button>
        <button type="button" className="button" onClick={close}>Not now</button>
      </div>
    </OpenedForm>
  );
}
