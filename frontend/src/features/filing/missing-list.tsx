import type { Lack } from './missing.js';

/** Says what responders will ask for; filing does not wait for it. */
export function MissingList({ lacks }: { lacks: readonly Lack[] }) {
  return (
    <section className="missing" aria-labelledby="missing" aria-live="polite">
      <h2 id="missing">{lacks.length === 0 ? 'Nothing is missing' : `Responders will ask for ${lacks.length} more`}</h2>
      {lacks.length === 0
        ? <p className="small">Everything that is usually asked for in the second round is here.</p>
        : <ul className="plain-list">{lacks.map((l) => <li key={l.what}><b>{l.what}</b><span className="small">{l.why}</span></li>)}</ul>}
    </section>
  );
}
