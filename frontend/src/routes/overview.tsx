import { useSuspenseQuery } from '@tanstack/react-query';
import { Link } from 'react-router-dom';
import { useMe } from '../app/me.js';
import { Section } from '../components/ui/section.js';
import { useTitle } from '../components/ui/title.js';
import { AgeBars } from '../features/overview/age-bars.js';
import { Flow } from '../features/overview/flow.js';
import { Pairs } from '../features/overview/pairs.js';
import { SeverityByStage } from '../features/overview/severity-stage.js';
import { WaitingByCause, WaitingByParty } from '../features/overview/waiting-tables.js';
import { readOverview } from '../features/overview/api/read-overview.js';

/** What blocks whom, since when, and whose move it is. */
export function OverviewPage() {
  const { programme } = useMe();
  useTitle('Overview');
  if (!programme) return <main id="main" className="page" tabIndex={-1}><h1>Overview</h1><p className="mt-3">You are in no programme yet.</p></main>;
  return <Sheet code={programme.code} name={programme.name} />;
}

function Sheet({ code, name }: { code: string; name: string }) {
  const { data } = useSuspenseQuery(readOverview(code));
  return (
    <main id="main" className="page overview" tabIndex={-1}>
      <div className="page-head"><h1>Overview</h1><p className="soft">{name}</p></div>
      <Section title="Next move" aside="whom everyone waits for">
        {data.waitingByParty.length === 0 ? <p className="sheet empty">Nobody is waited for.</p> : <WaitingByParty rows={data.waitingByParty} programme={code} />}
      </Section>
      <div className="overview-two">
        <Section title="Open by severity and stage" end={<Link to="/register">In the register</Link>}><SeverityByStage cells={data.bySeverityAndStage} /></Section>
        <Section title="Open by pair"><Pairs rows={data.byPair} /></Section>
      </div>
      <div className="overview-two">
        <Section title="Age"><AgeBars rows={data.byAge} /></Section>
        <Section title="Waiting clock"><WaitingByCause rows={data.waitingByCause} /></Section>
      </div>
      {data.flow.length > 0 && <Flow weeks={data.flow} />}
    </main>
  );
}
