import type { DecodeResult } from '#shared/decode';

/** A decode without a hint is an answer too: it says where else to look. */
export function NoMismatch({ number, lookNext }: { number: number; lookNext: DecodeResult['lookNext'] }) {
  return (
    <section className="sheet no-mismatch" aria-label="No mismatch found">
      <p className="hint-summary">No mismatch found by decode {number}.</p>
      <LookNext lookNext={lookNext} />
    </section>
  );
}

export function LookNext({ lookNext }: { lookNext: DecodeResult['lookNext'] }) {
  if (lookNext.length === 0) return null;
  return (
    <div className="look-next">
      <h3>Look next</h3>
      <ul className="plain-list">{lookNext.map((l) => <li key={l.place}><b>{l.place}</b>: {l.why}</li>)}</ul>
    </div>
  );
}
