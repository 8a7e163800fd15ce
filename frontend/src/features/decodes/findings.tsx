import type { DecodeResult } from '#shared/decode';
import { Section } from '../../components/ui/section.js';
import { airLabel, airText } from '../../lib/settings.js';
import { probability } from '../../lib/units.js';

/** Everything that the signal itself says, with how it is known; and what could not be told, with the reason. */
export function Findings({ result }: { result: DecodeResult }) {
  const known = Object.entries(result.air).filter(([, v]) => v.value !== null);
  const unknown = Object.entries(result.air).filter(([, v]) => v.value === null);
  if (known.length + unknown.length + result.tried.length === 0) return null;
  return (
    <Section title="What the air shows" aside={`${known.length} determined · ${unknown.length} not determinable`}>
      <div className="sheet scroller" tabIndex={0} role="group" aria-label="What the air shows">
        <table className="data">
          <thead><tr><th scope="col">Property</th><th scope="col" className="n">Value</th><th scope="col" className="n">Sure</th><th scope="col">How it is known</th></tr></thead>
          <tbody>
            {known.map(([name, v]) => (
              <tr key={name}><td>{airLabel(name)}</td><td className="n fig">{airText(name, v.value)}</td><td className="n fig">{v.confidence === undefined ? '' : `${probability(v.confidence)} %`}</td><td className="soft">{v.method ?? ''}</td></tr>
            ))}
            {unknown.map(([name, v]) => (
              <tr key={name}><td>{airLabel(name)}</td><td className="n soft">not determinable</td><td /><td className="soft">{v.reason ?? ''}</td></tr>
            ))}
          </tbody>
        </table>
      </div>
      {result.tried.length > 0 && (
        <details className="tried">
          <summary className="small">Tried and rejected: {result.tried.length}</summary>
          <ul className="plain-list small">{result.tried.map((t) => <li key={`${t.what} ${t.result}`}><b>{t.what}</b>: {t.result}</li>)}</ul>
        </details>
      )}
    </Section>
  );
}
