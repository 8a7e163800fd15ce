import { useState, type FormEvent } from 'react';
import type { Issue } from '#shared/api/issues';
import { SEVERITIES, type Severity } from '#shared/vocabulary';
import { OpenedForm } from '../../components/ui/opened-form.js';
import { Radios } from '../../components/ui/radios.js';
import { Refused } from '../../components/ui/refused.js';
import { useChangeIssue } from './api/change-issue.js';

/** The one thing that a manager changes on an issue; what it was before stays in the history. */
export function SeverityForm({ issue, close }: { issue: Issue; close: () => void }) {
  const change = useChangeIssue({ programme: issue.programme.code, number: issue.number });
  const [severity, setSeverity] = useState<Severity>(issue.severity);
  const send = (e: FormEvent): void => {
    e.preventDefault();
    change.mutate({ version: issue.version, severity }, { onSuccess: close });
  };
  return (
    <OpenedForm className="panel correct-form" onSubmit={send} aria-label="Change the severity">
      <Radios legend="Severity" value={severity} options={SEVERITIES.map((s) => [s, s] as const)} onChange={setSeverity} />
      <Refused error={change.error} />
      <div className="actions">
        <button type="submit" className="button button-main" disabled={change.isPending || severity === issue.severity}>Keep the severity</button>
        <button type="button" className="button" onClick={close}>Leave as it is</button>
      </div>
    </OpenedForm>
  );
}
