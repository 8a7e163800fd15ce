import type { AirValue, DecodeResult } from '#shared/decode';
import { Section } from '../../components/ui/section.js';
import { airLabel, airText, inAirOrder, partsOf } from '../../lib/settings.js';
import { counted, probability } from '../../lib/units.js';

function Value({ name, found }: { name: string; found: AirValue }) {
  const parts = partsOf(found.value);
  if (!parts) return <span className="fig">{airText(name, found.value)}</span>;
  return <dl className="value-parts">{parts.map(([part, text]) => <div key={part}><dt>{part}</dt><dd className="fig">{text}</dd></div>)}</dl>;
}

function Known({ names, air }: { names: readonly string[]; air: DecodeResult['air'] }) {
  return (
    <div className="sheet scroller" tabIndex={0} role="group" aria-label="What the air shows">
      <table className="data tight-rows findings" role="table">
        <thead role="rowgroup"><tr role="row"><th role="columnheader" scope="col">Property</th><th role="columnheader" scope="col">Value</th><th role="columnheader" scope="col" className="n">Sure</th><th role="columnheader" scope="col">How it is known</th></tr></thead>
        <tbody role="rowgroup">
          {names.map((name) => {
            const found = air[name]!;
            return <tr key={name} role="row"><td role="cell">{airLabel(name)}</td><td role="cell"><Value name={name} found={found} /></td><td role="cell" className="n fig">{found.confidence === undefined ? '' : `${probability(found.confidence)} %`}</td><td role="cell" className="soft">{found.method ?? ''}</td></tr>;
          })}
        </tbody>
      </table>
    </div>
  );
}

/** Everything that the signal itself says, with how it is known; and what could not be told, with the reason. */
export function Findings({ result }: { result: DecodeResult }) {
  const { air, tried } = result;
  const names = inAirOrder(Object.keys(air));
  const known = names.filter((name) => air[name]!.value !== null);
  const unknown = names.filter((name) => air[name]!.value === null);
  if (names.length + tried.length === 0) return null;
  return (
    <Section title="What the air shows" aside={`decoded in ${(result.timingMs.total / 1000).toFixed(1)} s by engine ${result.engine.version}`}>
      {known.length > 0 && <Known names={known} air={air} />}
      {unknown.length > 0 && (
        <details className="more-findings">
          <summary>{counted(unknown.length, 'property', 'properties')} not determinable</summary>
          <ul className="plain-list">{unknown.map((name) => <li key={name}><b>{airLabel(name)}</b>: {air[name]!.reason ?? 'no reason given'}</li>)}</ul>
        </details>
      )}
      {tried.length > 0 && (
        <details className="more-findings">
          <summary>{counted(tried.length, 'reading')} tried</summary>
          <ul className="plain-list">{tried.map((t) => <li key={`${t.what} ${t.result}`}><b>{t.what}</b>: {t.result}</li>)}</ul>
        </details>
      )}
    </Section>
  );
}
