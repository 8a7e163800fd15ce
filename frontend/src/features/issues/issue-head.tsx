import { Fragment } from 'react';
import { Link } from 'react-router-dom';
import type { Issue } from '#shared/api/issues';
import type { Side } from '#shared/vocabulary';
import { SideMark } from '../../components/marks/side-mark.js';
import { When } from '../../components/ui/when.js';
import { frequency } from '../../lib/units.js';
import { FollowButton } from './follow-button.js';

function End({ issue, side }: { issue: Issue; side: Side }) {
  const { party, unit, build } = issue[side];
  return (
    <SideMark side={side}>
      <span>
        <b>{party.name}</b> <span className="soft">{unit.name} {unit.part}{build ? ', build ' : ', build not stated'}</span>
        {build && <span className="fig">{build.label}</span>}
        {issue.transmitter === side && <span className="soft">, transmits</span>}
      </span>
    </SideMark>
  );
}

/** What is wrong, since when, and between whom. */
export function IssueHead({ issue, change }: { issue: Issue; change: { words: string; open: () => void } | null }) {
  const rungs = ([['downlink', issue.lastRung.downlink], ['uplink', issue.lastRung.uplink]] as const).filter(([, rung]) => rung);
  return (
    <div className="issue-head">
      <p className="issue-number fig">
        {issue.programme.code}/{issue.number} <span className={issue.severity === 'critical' ? 'hot' : ''}>{issue.severity}</span> <span>raised <When at={issue.raisedAt} as="full" /></span>
      </p>
      <h1>{issue.title}</h1>
      <div className="ends">
        <End issue={issue} side="a" />
        <Link className="bare-link soft between" to={`/links/${issue.link.id}`}>
          {issue.link.name}{issue.link.centreFrequencyHz !== null && <>, <span className="fig">{frequency(issue.link.centreFrequencyHz)}</span></>}
        </Link>
        <End issue={issue} side="b" />
      </div>
      <p className="small issue-under">
        <span>Last rung reached: {rungs.length === 0 ? 'not stated' : rungs.map(([direction, rung], k) => <Fragment key={direction}>{k > 0 && ', '}<b>{rung}</b> {direction}</Fragment>)}</span>
        <FollowButton issue={issue} />
        {change && <button type="button" className="text-button" onClick={change.open}>{change.words}</button>}
      </p>
    </div>
  );
}
