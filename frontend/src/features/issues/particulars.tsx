import type { ReactNode } from 'react';
import type { Issue } from '#shared/api/issues';
import { Section } from '../../components/ui/section.js';
import { Prose } from '../../components/ui/prose.js';
import { days } from '../../lib/times.js';
import { decibels } from '../../lib/units.js';
import { CAUSE_LABELS } from './next-move-form.js';

const Said = ({ children }: { children: ReactNode }) => (children === null || children === '' ? <span className="soft words-only">not stated</span> : <>{children}</>);

/** What was going on around the link: the description, the signal path, the clocks, the last pair that worked. */
export function Particulars({ issue }: { issue: Issue }) {
  const { signalPath: path } = issue;
  const facts: [string, ReactNode][] = [
    ['Signal path', path.path],
    ['Attenuation', path.attenuationDb === null ? null : <span className="fig">{decibels(path.attenuationDb)}</span>],
    ['Level', path.levelDbm === null ? null : <span className="fig">{decibels(path.levelDbm, 'dBm')}</span>],
    ['Clock source', path.clockSource],
    ['Late and overflow counters', path.lateCounters],
    ['Last pair that worked', issue.baseline],
  ];
  return (
    <>
      {issue.description && <Section title="Description"><Prose>{issue.description}</Prose></Section>}
      <Section title="Set-up">
        <dl className="facts sheet wide-facts">
          {facts.map(([name, value]) => <div key={name}><dt>{name}</dt><dd><Said>{value}</Said></dd></div>)}
          {issue.waiting.length > 0 && <div><dt>Waited so far</dt><dd>{issue.waiting.map((w) => `${CAUSE_LABELS[w.cause]} ${days(w.days)}`).join(' · ')}</dd></div>}
        </dl>
      </Section>
    </>
  );
}
