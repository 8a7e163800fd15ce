import { useMe } from './me.js';

/** The programme that the pages show; a choice only for people who are in several. */
export function ProgrammeChoice() {
  const { programme, programmes, choose } = useMe();
  if (!programme) return null;
  if (programmes.length === 1) return <span className="programme-name">{programme.name}</span>;
  return (
    <select className="programme-select" aria-label="Programme" value={programme.code} onChange={(e) => choose(e.target.value)}>
      {programmes.map((p) => <option key={p.code} value={p.code}>{p.name}</option>)}
    </select>
  );
}
