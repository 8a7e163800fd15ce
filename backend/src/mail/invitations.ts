import type { Letter } from './compose.js';
import { oneLine } from './compose.js';
import { FIRST_RETRY_S, LONGEST_RETRY_S, type OutboxParts } from './outbox.js';

interface DueInvitation { id: string; token: string; email: string; programme: string; party: string; invitedBy: string; expiresAt: Date; messageId: string; attempts: number }

const BATCH = 20;

/** Sends the invitations that are due, at least once; the link's secret is forgotten with the sending. Answers how many it tried. */
export async function sendInvitations(parts: OutboxParts): Promise<number> {
  const { rows } = await parts.pool.query<DueInvitation>(`
    update invitation_letters l set attempts = attempts + 1, next_attempt_at = now() + least($2 * power(2, attempts), $3) * interval '1 second'
    where l.invitation_id in (select invitation_id from invitation_letters where settled_at is null and next_attempt_at <= now() order by next_attempt_at limit $1 for update skip locked)
    returning l.invitation_id as id, l.token, l.email, l.programme, l.party, l.invited_by as "invitedBy", l.expires_at as "expiresAt", l.message_id as "messageId", l.attempts`,
  [BATCH, FIRST_RETRY_S, LONGEST_RETRY_S]);
  for (const due of rows) await sendOne(parts, due);
  return rows.length;
}

async function sendOne(parts: OutboxParts, due: DueInvitation): Promise<void> {
  try {
    // A link that has ended helps nobody.
    if (due.expiresAt > new Date()) {
      await parts.transport.sendMail({
        from: parts.from, ...invitationLetter(due, parts.publicUrl),
        messageId: `<${due.messageId}@${new URL(parts.publicUrl).hostname}>`, headers: { 'Auto-Submitted': 'auto-generated' },
      });
    }
    await parts.pool.query('update invitation_letters set settled_at = now(), token = null, last_error = null where invitation_id = $1', [due.id]);
  } catch (error) {
    const reason = error instanceof Error ? error.message : String(error);
    parts.log.warn({ invitationId: due.id, attempts: due.attempts, reason }, 'an invitation could not be sent and is tried again');
    await parts.pool.query('update invitation_letters set last_error = $2 where invitation_id = $1', [due.id, reason.slice(0, 500)]);
  }
}

function invitationLetter(due: DueInvitation, publicUrl: string): Omit<Letter, 'to'> & { to: string } {
  const text = [
    oneLine(`${due.invitedBy} invites you to the programme ${due.programme} on Crosstie, for ${due.party}.`), '',
    `${publicUrl}/invitations/${due.token}`, '',
    `Open the link and sign in with this address, ${due.email}. It works once, until ${due.expiresAt.toISOString().slice(0, 16).replace('T', ' ')} UTC.`,
    'Were you not expecting this? Leave it; nothing happens until the link is used.',
  ].join('\n');
  return { to: due.email, subject: oneLine(`Invitation to ${due.programme}`), text };
}
