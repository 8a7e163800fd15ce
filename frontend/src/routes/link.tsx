import { useSuspenseQuery } from '@tanstack/react-query';
import { useState } from 'react';
import { Link as To, useParams } from 'react-router-dom';
import type { LinkDetail } from '#shared/api/links';
import { STAGE_LABELS, type Stage } from '#shared/vocabulary';
import { useMayFile } from '../app/me.js';
import { SideMark } from '../components/marks/side-mark.js';
import { Section } from '../components/ui/section.js';
import { useTitle } from '../components/ui/title.js';
import { AddBuildForm } from '../features/links/add-build-form.js';
import { Interworking } from '../features/links/interworking.js';
import { readLink } from '../features/links/api/read-link.js';
import { addressOf } from '../lib/issue-name.js';
import { dateOf } from '../lib/times.js';
import { frequency } from '../lib/units.js';

function Side({ link, side }: { link: LinkDetail; side: 'a' | 'b' }) {
  const [adding, add] = useState(false);
  const { party, unit } = link[side];
  const may = side === 'a' ? link.actions.addBuildA : link.actions.addBuildB;
  const builds = link.unitBuilds[side];
  return (
    <Section title={<SideMark side={side}>{party.name}</SideMark>} aside={`${unit.name}, ${unit.part}`}
      end={may && !adding && <button type="button" className="text-button" onClick={() => add(true)}>Add a build<span className="hidden-text"> of {unit.name}</span></button>}>
      {adding && <AddBuildForm unit={unit} close={() => add(false)} />}
      {builds.length === 0 ? <p className="sheet empty">No build yet.</p> : (
        <table className="data sheet">
          <thead><tr><th scope="col">Build</th><th scope="col">Since</th><th scope="col">What changed</th></tr></thead>
          <tbody>{builds.map((b) => <tr key={b.id}><td className="fig"><b>{b.label}</b></td><td className="nowrap">{dateOf(b.addedAt)}</td><td className="soft">{b.note}</td></tr>)}</tbody>
        </table>
      )}
    </Section>
  );
}

function Issues({ issues }: { issues: LinkDetail['issues'] }) {
  return (
    <ul className="plain-list sheet unit-list">
      {issues.map((i) => <li key={i.number}><To className="bare-link" to={addressOf(i)}><span className="fig soft">{i.programme}/{i.number}</span> {i.title}</To> <span className="small">{i.severity}, {STAGE_LABELS[i.stage as Stage] ?? i.stage}</span></li>)}
    </ul>
  );
}

/** One link: its two sides with their builds, what works on it, and its issues. */
export function LinkPage() {
  const { linkId = '' } = useParams();
  const { data: link } = useSuspenseQuery(readLink(linkId));
  const mayFile = useMayFile(link.programme);
  useTitle(link.name);
  return (
    <main id="main" className="page" tabIndex={-1}>
      <div className="page-head">
        <h1>{link.name}</h1>
        <p className="soft">{link.interface === 'wifi' ? 'Wi‑Fi' : link.interface}{link.centreFrequencyHz !== null && <>, <span className="fig">{frequency(link.centreFrequencyHz)}</span></>}
          {link.baseline ? <> · last pair that worked: <span className="fig">{link.baseline.buildA}</span> with <span className="fig">{link.baseline.buildB}</span>, {dateOf(link.baseline.at)}</> : ' · no pair has worked yet'}</p>
        {mayFile && <To className="button button-main" to={`/issues/new?link=${link.id}`}>File an issue on it</To>}
      </div>
      <div className="two-sides"><Side link={link} side="a" /><Side link={link} side="b" /></div>
      <Section title="Interworking" aside="by capability">
        {link.interworking.length === 0 ? <p className="sheet empty">Nothing has been tried yet.</p> : <Interworking rows={link.interworking} />}
      </Section>
      <Section title="Issues on it" end={<To to={`/register?link=${link.id}&standing=any`}>All in the register</To>}>
        {link.issues.length === 0 ? <p className="sheet empty">No issue.</p> : <Issues issues={link.issues} />}
      </Section>
    </main>
  );
}
