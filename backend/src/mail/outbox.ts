import { createTransport, type Transporter } from 'nodemailer';
import type { Pool } from 'pg';
import type { Logger } from 'pino';
import type { Database } from '../db/database.js';
import { compose, type Due } from './compose.js';

const BATCH = 20;
export const FIRST_RETRY_S = 5;
export const LONGEST_RETRY_S = 3600;
/** A mail server that says nothing must not hold up the letters behind. */
const PATIENCE_MS = 10_000;

export interface OutboxParts {
  /** The worker's role: the outbox itself. */
  readonly pool: Pool;
  /** The application's role: a letter is written under its reader. */
  readonly database: Database;
  readonly transport: Pick<Transporter, 'sendMail'>;
  readonly from: string;
  readonly publicUrl: string;
  readonly log: Pick<Logger, 'warn'>;
}

export function smtpTransport(url: string): Transporter {
  return createTransport({ url, disableFileAccess: true, disableUrlAccess: true, connectionTimeout: PATIENCE_MS, greetingTimeout: PATIENCE_MS, socketTimeout: 3 * PATIENCE_MS } as object);
}

/**
 * Sends what is due, at least once: the next try is written down before the first byte is sent, so
 * that a killed worker's letter goes out again, and a repeat carries the same Message-ID. Answers
 * how many letters it tried.
 */
export async function sendDue(parts: OutboxParts): Promise<number> {
  const { rows } = await parts.pool.query<Due>(`
    update outbox o set attempts = attempts + 1, next_attempt_at = now() + least($2 * power(2, attempts), $3) * interval '1 second'
    where o.id in (select id from outbox where settled_at is null and next_attempt_at <= now() order by next_attempt_at limit $1 for update skip locked)
    returning o.id, o.kind, o.person_id as "personId", o.issue_id as "issueId", o.event_id as "eventId", o.entry_id as "entryId", o.message_id as "messageId", o.attempts`,
  [BATCH, FIRST_RETRY_S, LONGEST_RETRY_S]);
  for (const due of rows) await sendOne(parts, due);
  return rows.length;
}

async function sendOne(parts: OutboxParts, due: Due): Promise<void> {
  try {
    const letter = await compose(parts.database, parts.publicUrl, due);
    if (typeof letter === 'string') return await settle(parts, due, letter);
    await parts.transport.sendMail({
      from: parts.from, to: letter.to, subject: letter.subject, text: letter.text,
      messageId: `<${due.messageId}@${new URL(parts.publicUrl).hostname}>`,
      // Letters of one issue stand together in the reader's mail program (RFC 5322 clause 3.6.4).
      references: `<${due.issueId}@${new URL(parts.publicUrl).hostname}>`,
      headers: { 'Auto-Submitted': 'auto-generated' },
    });
    await settle(parts, due, 'sent');
  } catch (error) {
    const reason = error instanceof Error ? error.message : String(error);
    parts.log.warn({ outboxId: due.id, attempts: due.attempts, reason }, 'a letter could not be sent and is tried again');
    await parts.pool.query('update outbox set last_error = $2 where id = $1', [due.id, reason.slice(0, 500)]);
  }
}

async function settle({ pool }: OutboxParts, due: Due, outcome: 'sent' | 'beyond-reach' | 'unwanted'): Promise<void> {
  await pool.query('update outbox set settled_at = now(), outcome = $2, last_error = null where id = $1', [due.id, outcome]);
}
