import { useState } from 'react';
import type { IssueHint } from '#shared/api/decodes';
import { When } from '../../components/ui/when.js';
import { probability } from '../../lib/units.js';
import { JudgeForm } from './judge-form.js';

function Verdicts({ hint }: { hint: IssueHint }) {
  if (hint.verdicts.length === 0) return null;
  return (
    <ul className="plain-list verdicts">
      {hint.verdicts.map((v) => (
        <li key={`${v.by} ${v.at}`}><b>{v.verdict === 'confirmed' ? 'Confirmed' : 'Refuted'}</b> by {v.by}, {v.party}, <When at={v.at} />{v.reason && <>: {v.reason}</>}</li>
      ))}
    </ul>
  );
}

/** One likely mismatch as a sentence that can be forwarded, its probability, its evidence, and what would disprove it. */
export function HintCard({ hint, first }: { hint: IssueHint; first: boolean }) {
  const [judging, judge] = useState<'confirmed' | 'refuted' | null>(null);
  const standing = hint.verdicts.at(-1)?.verdict;
  return (
    <article className={`hint-card ${first ? 'first' : ''} ${standing === 'refuted' ? 'refuted' : ''}`} aria-label={hint.summary}>
      <p className="prob"><span className="hidden-text">Probability </span>{probability(hint.confidence)}<small> %</small></p>
      <div className="hint-body">
        <p className="hint-summary">{hint.summary}</p>
        <ul className="evidence">
          {hint.evidence.filter((item) => !hint.summary.startsWith(item.text)).map((item) => <li key={item.text}>{item.text}{item.clause && <span className="clause"> ({item.clause})</span>}</li>)}
        </ul>
        {hint.consequences && hint.consequences.length > 0 && <p className="hint-more">Follows from it: {hint.consequences.join('; ')}.</p>}
        <p className="hint-more">Would disprove it: {hint.wouldDisprove}</p>
        <Verdicts hint={hint} />
        {judging && <JudgeForm hint={hint} verdict={judging} close={() => judge(null)} />}
      </div>
      {hint.actions.judge && (
        <div className="hint-acts no-print">
          <button type="button" className="button" aria-expanded={judging === 'confirmed'} onClick={() => judge(judging === 'confirmed' ? null : 'confirmed')}>Confirm</button>
          <button type="button" className="button" aria-expanded={judging === 'refuted'} onClick={() => judge(judging === 'refuted' ? null : 'refuted')}>Refute</button>
        </div>
      )}
    </article>
  );
}
