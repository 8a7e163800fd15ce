import { useState, type FormEvent } from 'react';
import type { PartyRef } from '#shared/api/common';
import type { Issue } from '#shared/api/issues';
import { WAITING_CAUSES, type WaitingCause } from '#shared/vocabulary';
import { Select, TextField } from '../../components/ui/field.js';
import { OpenedForm } from '../../components/ui/opened-form.js';
import { Refused } from '../../components/ui/refused.js';
import { useSetNextMove } from './api/set-next-move.js';

export const CAUSE_LABELS: Record<WaitingCause, string> = { 'side-a': 'side A', 'side-b': 'side B', lab: 'the lab', 'rig-away': 'rig away' };

export function NextMoveForm({ issue, parties, close }: { issue: Issue; parties: readonly PartyRef[]; close: () => void }) {
  const change = useSetNextMove({ programme: issue.programme.code, number: issue.number });
  const [partyId, setParty] = useState('');
  const [ask, setAsk] = useState('');
  const [due, setDue] = useState('');
  const [cause, setCause] = useState<WaitingCause | ''>('');
  const send = (e: FormEvent): void => {
    e.preventDefault();
    change.mutate({ version: issue.version, partyId, ask, due: due || null, ...(cause ? { cause } : {}) }, { onSuccess: close });
  };
  return (
    <OpenedForm className="panel next-move-form" onSubmit={send}>
      <Select label="Who" none="choose a party" required value={partyId} options={parties.map((p) => [p.id, p.name] as const)} onChange={(e) => setParty(e.target.value)} />
      <TextField label="Asked to" required maxLength={500} value={ask} onChange={(e) => setAsk(e.target.value)} />
      <div className="fields">
        <TextField label="By" type="date" value={due} onChange={(e) => setDue(e.target.value)} />
        <Select label="Clock runs for" none="the party asked" value={cause} options={WAITING_CAUSES.map((c) => [c, CAUSE_LABELS[c]] as const)} onChange={(e) => setCause(e.target.value as WaitingCause)} />
      </div>
      <Refused error={change.error} />
      <div className="actions">
        <button type="submit" className="button button-main" disabled={change.isPending}>Pass the move</button>
        <button type="button" className="button" onClick={close}>Leave as it is</button>
      </div>
    </OpenedForm>
  );
}
