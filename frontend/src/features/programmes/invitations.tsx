import { useState } from 'react';
import type { Programme } from '#shared/api/people';
import { Refused } from '../../components/ui/refused.js';
import { Section } from '../../components/ui/section.js';
import { When } from '../../components/ui/when.js';
import { ROLE_LABELS } from '../../lib/roles.js';
import { InviteForm } from './invite-form.js';
import { useRevokeInvitation } from './api/revoke-invitation.js';

/** Invitations that nobody has taken up yet. */
export function Invitations({ programme }: { programme: Programme }) {
  const [inviting, invite] = useState(false);
  const revoke = useRevokeInvitation(programme.code);
  const { invitations, actions } = programme;
  if (!actions.invite && invitations.length === 0) return null;
  return (
    <Section title="Invitations" aside={invitations.length === 0 ? 'none open' : `${invitations.length} open`}
      end={actions.invite && !inviting && <button type="button" className="text-button" onClick={() => invite(true)}>Invite a person</button>}>
      {inviting && <InviteForm programme={programme} close={() => invite(false)} />}
      <Refused error={revoke.error} />
      {invitations.length > 0 && (
        <div className="sheet scroller" tabIndex={0} role="group" aria-label="Invitations">
          <table className="data">
            <thead><tr><th scope="col">Address</th><th scope="col">Party</th><th scope="col">Role</th><th scope="col">Invited by</th><th scope="col">Ends</th><th scope="col"><span className="hidden-text">Actions</span></th></tr></thead>
            <tbody>
              {invitations.map((i) => (
                <tr key={i.id}><td>{i.email}</td><td>{i.party.name}</td><td>{ROLE_LABELS[i.role]}</td><td>{i.invitedBy}</td><td className="nowrap"><When at={i.expiresAt} as="full" /></td>
                  <td>{actions.invite && <button type="button" className="text-button" disabled={revoke.isPending} onClick={() => revoke.mutate(i.id)}>Take back<span className="hidden-text"> the invitation of {i.email}</span></button>}</td></tr>
              ))}
            </tbody>
          </table>
        </div>
      )}
    </Section>
  );
}
