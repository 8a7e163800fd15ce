import { useSuspenseQuery } from '@tanstack/react-query';
import { useMe } from '../app/me.js';
import { useTitle } from '../components/ui/title.js';
import { Audit } from '../features/programmes/audit.js';
import { Invitations } from '../features/programmes/invitations.js';
import { PartyTable } from '../features/programmes/parties.js';
import { PeopleTable } from '../features/programmes/people.js';
import { readProgramme } from '../features/programmes/api/read-programme.js';
import { counted } from '../lib/units.js';

/** Who is in, who sees what, and where the record of it is. */
export function ProgrammePage() {
  const { programme } = useMe();
  useTitle('Programme');
  if (!programme) return <main id="main" className="page" tabIndex={-1}><h1>Programme</h1><p className="mt-3">You are in no programme yet.</p></main>;
  return <Sheet code={programme.code} />;
}

function Sheet({ code }: { code: string }) {
  const { data } = useSuspenseQuery(readProgramme(code));
  return (
    <main id="main" className="page" tabIndex={-1}>
      <div className="page-head"><h1>{data.name}</h1><p className="fig soft">{data.code}</p></div>
      {data.stuckMail !== null && data.stuckMail > 0 && <p className="notice waits mb-6">{counted(data.stuckMail, 'message')} could not be delivered yet and {data.stuckMail === 1 ? 'is' : 'are'} tried again. Check the mail server’s address in the configuration.</p>}
      <PartyTable programme={data} />
      <PeopleTable programme={data} />
      <Invitations programme={data} />
      {data.actions.readAudit && <Audit programme={code} />}
    </main>
  );
}
