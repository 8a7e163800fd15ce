import { parseArgs } from 'node:util';
import { migrate } from '../db/migrate.js';
import { firstProgramme, makeProgramme } from '../ops/programme.js';
import { needed, runOpsCommand, say, UsageError } from './ops-command.js';

const USAGE = 'npm run admin -- programme CODE NAME --invite EMAIL [--party HOST-PARTY]';

/** npm run admin: makes the first programme and invites its administrator. */
await runOpsCommand(async () => {
  const { positionals, values } = parse();
  const [verb, code, name, ...rest] = positionals;
  if (verb !== 'programme' || rest.length > 0) throw new UsageError(`Usage: ${USAGE}`);
  const wanted = firstProgramme.safeParse({
    code, name, email: values.invite, party: values.party ?? name, issuer: needed('OIDC_ISSUER'), days: process.env['INVITATION_DAYS'] || 14,
  });
  if (!wanted.success) throw new UsageError(`${wanted.error.issues.map((issue) => `${issue.path.join('.')}: ${issue.message}`).join('\n')}\nUsage: ${USAGE}`);
  const ownerUrl = needed('DATABASE_OWNER_URL');
  await migrate(ownerUrl);
  const token = await makeProgramme(ownerUrl, wanted.data);
  say(`Made the programme ${wanted.data.code}. Send this link, which works once and within ${wanted.data.days} days, to ${wanted.data.email}:`);
  say(`${needed('PUBLIC_URL')}/invitations/${token}`);
});

function parse() {
  try {
    return parseArgs({ allowPositionals: true, options: { invite: { type: 'string' }, party: { type: 'string' } } });
  } catch (error) {
    throw new UsageError(`${(error as Error).message}\nUsage: ${USAGE}`);
  }
}
