import { useSuspenseQuery } from '@tanstack/react-query';
import { Link } from 'react-router-dom';
import { useMayFile, useMe } from '../app/me.js';
import { Section } from '../components/ui/section.js';
import { useTitle } from '../components/ui/title.js';
import { When } from '../components/ui/when.js';
import { Changes } from '../features/overview/day-sheet/changes.js';
import { RunningDecodes } from '../features/overview/day-sheet/running.js';
import { WaitingItem } from '../features/overview/day-sheet/waiting-list.js';
import { readDaySheet } from '../features/overview/api/read-day-sheet.js';
import { useMarkDaySheetRead } from '../features/overview/api/mark-day-sheet-read.js';
import { counted } from '../lib/units.js';

/** What stands open in sum, each figure leading to its rows. */
function Sum({ counts }: { counts: { open: number; critical: number; late: number; mine: number } }) {
  return (
    <p className="day-sum">
      <Link to="/register"><b>{counts.open}</b> open</Link>, of them <Link to="/register?severities=critical"><b>{counts.critical}</b> critical</Link> and{' '}
      <Link to="/register?late=true" className={counts.late ? 'late' : ''}><b>{counts.late}</b> late</Link>; <Link to="/register?move=mine"><b>{counts.mine}</b> {counts.mine === 1 ? 'waits' : 'wait'} for your party</Link>.
    </p>
  );
}

/** What waits for me or my party, and what changed since I looked. */
export function DaySheetPage() {
  const { me, programme } = useMe();
  const { data } = useSuspenseQuery(readDaySheet());
  const mark = useMarkDaySheetRead();
  const party = me.memberships.find((m) => m.programme.code === programme?.code)?.party.name ?? 'my party';
  const mayFile = useMayFile(programme?.code);
  useTitle('Day sheet');
  return (
    <main id="main" className="page day-page" tabIndex={-1}>
      <div className="page-head">
        <h1>Day sheet</h1>
        <Sum counts={data.counts} />
        {mayFile && <Link className="button button-main" to="/issues/new">File an issue</Link>}
      </div>
      <div className="day-columns">
        <Section title={`Waiting for ${party}`} aside={data.waitingForParty.length > 0 ? counted(data.waitingForParty.length, 'issue') : undefined}>
          {data.waitingForParty.length === 0
            ? <p className="sheet empty">Nobody waits for {party}.</p>
            : <ol className="plain-list sheet waiting-list">{data.waitingForParty.map((row) => <WaitingItem key={`${row.programme}/${row.number}`} row={row} />)}</ol>}
        </Section>
        <div>
          {data.running.length > 0 && <Section title="Decodes under way"><RunningDecodes items={data.running} /></Section>}
          <Section title="Changed since you looked" aside={data.lastLookedAt ? <When at={data.lastLookedAt} /> : 'you have not looked yet'}
            end={data.changed.length > 0 && <button type="button" className="text-button" disabled={mark.isPending} onClick={() => mark.mutate()}>I have seen these</button>}>
            {data.changed.length === 0 ? <p className="small">Nothing has changed.</p> : <Changes items={data.changed} />}
          </Section>
        </div>
      </div>
    </main>
  );
}
