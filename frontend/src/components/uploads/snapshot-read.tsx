import { useState } from 'react';
import type { SnapshotReading } from '#shared/api/files';
import { parameterLabel, settingText } from '../../lib/settings.js';
import { counted } from '../../lib/units.js';

const FIRST = 6;

/** What was read from a snapshot: each parameter with its place, and the lines that were not understood. */
export function SnapshotRead({ reading }: { reading: SnapshotReading }) {
  const [all, showAll] = useState(false);
  const { parameters, notUnderstood, problems, syntax, vocabularies } = reading;
  const shown = all ? parameters : parameters.slice(0, FIRST);
  return (
    <div className="snapshot-read">
      <p className="small">{[syntax, ...vocabularies].join(', ')} · {counted(parameters.length, 'parameter')} read{notUnderstood.length ? ` · ${counted(notUnderstood.length, 'line')} not understood` : ''}</p>
      {problems.map((problem) => <p key={problem} className="notice waits">{problem}</p>)}
      <div className="scroller" tabIndex={0} role="group" aria-label="Parameters read">
        <table className="data tight">
          <thead><tr><th scope="col">Parameter</th><th scope="col">Value</th><th scope="col" className="n">Line</th><th scope="col">As written</th></tr></thead>
          <tbody>
            {shown.map((p) => (
              <tr key={`${p.parameter} ${p.path}`}>
                <td>{parameterLabel(p.parameter)}</td><td className="fig">{settingText(p.parameter, p.value)}</td>
                <td className="n fig">{p.line ?? ''}</td><td className="fig soft">{p.raw}</td>
              </tr>
            ))}
          </tbody>
        </table>
      </div>
      {parameters.length > FIRST && <button type="button" className="text-button" aria-expanded={all} onClick={() => showAll(!all)}>{all ? 'Show fewer' : `Show all ${parameters.length}`}</button>}
      {notUnderstood.length > 0 && (
        <details>
          <summary className="small">{counted(notUnderstood.length, 'line')} not understood</summary>
          <ul className="plain-list not-understood">
            {notUnderstood.map((n) => <li key={`${n.path} ${n.line}`} className="fig"><span className="soft">{n.line ?? '–'}</span> {n.raw || n.path}</li>)}
          </ul>
        </details>
      )}
    </div>
  );
}
