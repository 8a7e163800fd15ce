import type { ChangeIssue } from '#shared/api/issues';
import type { LinkInterface } from '#shared/vocabulary';
import { refuseUnless, type GrantedIssue } from '../access/rules.js';
import { conflict, forbidden } from '../http/problems.js';
import type { Caller, Services } from '../http/services.js';
import { recordEvent } from './record.js';
import { refuseUnknownRungs } from './rungs.js';
import { mayChange } from './standing.js';

interface Before { title: string; description: string; severity: string; downlink: string | null; uplink: string | null; signalPath: string; baseline: string; buildAId: string | null; buildBId: string | null; transmitter: string | null; interface: LinkInterface }

const COLUMNS = {
  title: 'title', description: 'description', severity: 'severity', baseline: 'baseline', transmitter: 'transmitter',
  buildAId: 'build_a_id', buildBId: 'build_b_id', signalPath: 'signal_path', downlink: 'rung_downlink', uplink: 'rung_uplink',
} as const;
type Field = keyof typeof COLUMNS;

const WORDS: Record<Field, string> = {
  title: 'the headline', description: 'the description', severity: 'the severity', baseline: 'the baseline', transmitter: 'the transmitter',
  buildAId: 'side A\'s build', buildBId: 'side B\'s build', signalPath: 'the signal path', downlink: 'the last rung down', uplink: 'the last rung up',
};

/** Edits what an issue says, where nobody else has meanwhile; the history names what changed, and from what for short fields. */
export async function changeIssue(services: Services, caller: Caller, { issue, change }: { issue: GrantedIssue; change: ChangeIssue }): Promise<void> {
  if (change.version !== issue.version) throw conflict('Somebody changed this issue while you read it. Read it again, then make your change.');
  if (!mayChange(issue, 'change-severity')) throw forbidden('Your party is not one of this link\'s sides.');
  const before = await beforeOf(services, issue.issueId);
  const wanted = changed(before, fields(change));
  if (wanted.length === 0) return;
  if (wanted.some(([field]) => field !== 'severity')) refuseUnless(issue.standing, 'edit-issue');
  if (change.lastRung) refuseUnknownRungs(change.lastRung, before.interface);
  const bind: unknown[] = [issue.issueId, issue.version];
  const sets = wanted.map(([field, value]) => {
    bind.push(field === 'signalPath' ? JSON.stringify(value) : value);
    return `${COLUMNS[field]} = $${bind.length}`;
  });
  const done = await services.database.change(`update issues set ${sets.join(', ')}, version = version + 1, updated_at = now() where id = $1 and version = $2`, bind);
  if (done === 0) throw conflict('Somebody changed this issue while you read it. Read it again, then make your change.');
  await recordEvent(services, { caller, standing: issue.standing }, {
    issueId: issue.issueId, programmeId: issue.standing.programmeId, kind: 'edited', text: `changed ${wanted.map(([field, value]) => said(field, before[field], value)).join('; ')}`,
  });
}

async function beforeOf(services: Services, issueId: string): Promise<Before> {
  const row = await services.database.row<Before>(`
    select i.title, i.description, i.severity, i.rung_downlink as downlink, i.rung_uplink as uplink, i.signal_path::text as "signalPath", i.baseline,
      i.build_a_id as "buildAId", i.build_b_id as "buildBId", i.transmitter, l.interface
    from issues i join links l on l.id = i.link_id where i.id = $1`, [issueId]);
  if (!row) throw conflict('This issue has gone.');
  return row;
}

function fields({ version: _version, lastRung, ...rest }: ChangeIssue): [Field, unknown][] {
  const rungs = lastRung ? [['downlink', lastRung.downlink], ['uplink', lastRung.uplink]] : [];
  return [...Object.entries(rest), ...rungs] as [Field, unknown][];
}

function changed(before: Before, wanted: [Field, unknown][]): [Field, unknown][] {
  return wanted.filter(([field, value]) => value !== undefined
    && (field === 'signalPath' ? JSON.stringify(JSON.parse(before.signalPath)) !== JSON.stringify(value) : before[field] !== value));
}

function said(field: Field, from: unknown, to: unknown): string {
  if (['description', 'signalPath', 'baseline', 'buildAId', 'buildBId'].includes(field)) return WORDS[field];
  return `${WORDS[field]} from "${String(from ?? 'not stated')}" to "${String(to ?? 'not stated')}"`;
}
