import { useState, type FormEvent } from 'react';
import type { Programme } from '#shared/api/people';
import { ROLES, type Role } from '#shared/vocabulary';
import { Select, TextField, type Option } from '../../components/ui/field.js';
import { OpenedForm } from '../../components/ui/opened-form.js';
import { Refused } from '../../components/ui/refused.js';
import { ROLE_LABELS } from '../../lib/roles.js';
import { instant } from '../../lib/times.js';
import { useInvite } from './api/invite.js';

/** An invitation works once, for one address, and its link is shown here alone. */
export function InviteForm({ programme, close }: { programme: Programme; close: () => void }) {
  const invite = useInvite(programme.code);
  const [email, setEmail] = useState('');
  const [partyId, setParty] = useState('');
  const [role, setRole] = useState<Role>('vendor-engineer');
  const send = (e: FormEvent): void => { e.preventDefault(); invite.mutate({ email, partyId, role }); };
  if (invite.data) {
    return (
      <div className="panel mb-4" role="status">
        <p><b>{email} is invited.</b> The message is on its way; this is the same link, shown once. It works until {instant(invite.data.expiresAt)}.</p>
        <p className="fig invitation-link">{invite.data.link}</p>
        <div className="actions"><button type="button" className="button" onClick={close}>Done</button></div>
      </div>
    );
  }
  return (
    <OpenedForm className="panel mb-4" onSubmit={send} aria-label="Invite a person">
      <div className="fields">
        <TextField label="Address" type="email" required maxLength={254} value={email} onChange={(e) => setEmail(e.target.value)} />
        <Select label="Party" required none="choose a party" value={partyId} options={programme.parties.map((p): Option => [p.id, p.name])} onChange={(e) => setParty(e.target.value)} />
        <Select label="Role" value={role} options={ROLES.map((r): Option => [r, ROLE_LABELS[r]])} onChange={(e) => setRole(e.target.value as Role)} />
      </div>
      <Refused error={invite.error} />
      <div className="actions"><button type="submit" className="button button-main" disabled={invite.isPending}>Invite</button><button type="button" className="button" onClick={close}>Not now</button></div>
    </OpenedForm>
  );
}
