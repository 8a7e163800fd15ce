import { keepPreviousData, useQuery } from '@tanstack/react-query';
import { useState } from 'react';
import { TextField } from '../../components/ui/field.js';
import { Refused } from '../../components/ui/refused.js';
import { Section } from '../../components/ui/section.js';
import { When } from '../../components/ui/when.js';
import { readAudit } from './api/read-audit.js';

const SIZE = 25;

/** Who did what with what, refusals and downloads included. Nothing in it can be changed. */
export function Audit({ programme }: { programme: string }) {
  const [page, setPage] = useState(1);
  const [from, setFrom] = useState('');
  const [to, setTo] = useState('');
  const [action, setAction] = useState('');
  const { data, error } = useQuery({
    ...readAudit(programme, { page, size: SIZE, ...(from ? { from } : {}), ...(to ? { to } : {}), ...(action.trim() ? { action: action.trim() } : {}) }),
    placeholderData: keepPreviousData,
  });
  const narrow = (set: (text: string) => void) => (e: { target: { value: string } }): void => { set(e.target.value); setPage(1); };
  const pages = data ? Math.max(1, Math.ceil(data.total / SIZE)) : 1;
  return (
    <Section title="Audit record" aside={data ? `${data.total} entries` : undefined}>
      <div className="fields audit-filter">
        <TextField label="From" type="date" value={from} onChange={narrow(setFrom)} />
        <TextField label="To" type="date" value={to} onChange={narrow(setTo)} />
        <TextField label="Action" figures value={action} onChange={narrow(setAction)} />
      </div>
      <Refused error={error} />
      {data && data.items.length === 0 && <p className="sheet empty">No entry in this range.</p>}
      {data && data.items.length > 0 && (
        <div className="sheet scroller" tabIndex={0} role="group" aria-label="Audit record">
          <table className="data tight-rows">
            <thead><tr><th scope="col">When</th><th scope="col">Who</th><th scope="col">Action</th><th scope="col">On</th><th scope="col">Detail</th><th scope="col">Outcome</th></tr></thead>
            <tbody>
              {data.items.map((e) => (
                <tr key={e.id}><td className="nowrap fig"><When at={e.at} as="full" /></td><td>{e.person ?? 'Crosstie'}{e.party && <span className="soft">, {e.party}</span>}</td><td className="fig">{e.action}</td><td className="fig">{e.object}</td><td>{e.detail}</td><td>{e.outcome === 'refused' ? <b>refused</b> : 'done'}</td></tr>
              ))}
            </tbody>
          </table>
        </div>
      )}
      {pages > 1 && (
        <nav className="paging" aria-label="Pages of the audit record">
          <button type="button" className="button" disabled={page <= 1} onClick={() => setPage(page - 1)}>Newer</button><span className="fig">{page} of {pages}</span>
          <button type="button" className="button" disabled={page >= pages} onClick={() => setPage(page + 1)}>Older</button>
        </nav>
      )}
    </Section>
  );
}
