import { useState } from 'react';
import type { Issue } from '#shared/api/issues';
import { Section } from '../../components/ui/section.js';
import { When } from '../../components/ui/when.js';
import { RetestForm } from './retest-form.js';
import { WaiverBlock } from './waiver.js';

/** Retests on named builds, and the waiver where one is asked for. */
export function Retests({ issue, id }: { issue: Issue; id: string }) {
  const [open, setOpen] = useState(false);
  const { retests, waiver } = issue;
  if (retests.length === 0 && !waiver && !issue.actions.retest) return null;
  return (
    <div id={id}>
      <Section title={waiver ? 'Retests and waiver' : 'Retests'} aside={retests.length === 0 ? 'no retest yet' : `${retests.filter((r) => r.outcome === 'clean').length} clean · ${retests.filter((r) => r.outcome === 'failed').length} failed`}
        end={issue.actions.retest && !open ? <button type="button" className="text-button" onClick={() => setOpen(true)}>Record a retest</button> : null}>
        {open && <RetestForm issue={issue} close={() => setOpen(false)} />}
        {retests.length > 0 && (
          <div className="sheet scroller" tabIndex={0} role="group" aria-label="Retests">
            <table className="data">
              <thead><tr><th scope="col">Outcome</th><th scope="col">Build A</th><th scope="col">Build B</th><th scope="col">Last rung</th><th scope="col">By</th><th scope="col" className="n">Decode</th></tr></thead>
              <tbody>
                {retests.map((r) => (
                  <tr key={r.id}>
                    <td><b>{r.outcome}</b>{r.note && <span className="small block">{r.note}</span>}</td>
                    <td className="fig">{r.buildA}</td><td className="fig">{r.buildB}</td>
                    <td>{[r.lastRung.downlink && `${r.lastRung.downlink} ↓`, r.lastRung.uplink && `${r.lastRung.uplink} ↑`].filter(Boolean).join(', ') || '–'}</td>
                    <td>{r.by} <span className="small block"><When at={r.at} as="full" /></span></td><td className="n fig">{r.decodeNumber ?? ''}</td>
                  </tr>
                ))}
              </tbody>
            </table>
          </div>
        )}
        {waiver && <WaiverBlock issue={issue} waiver={waiver} />}
      </Section>
    </div>
  );
}
