const CAUTIONS = [
  'Transmit only into a cabled, attenuated or shielded set-up, or under a licence for the band.',
  'Check the level before you connect an analyser.',
  'Keep the exposure distances that the equipment’s maker states.',
  'Local rules and licensed practice come first.',
];

/** What the trade says wherever a capture or a retest is asked for. */
export function Cautions({ what }: { what: string }) {
  return (
    <div className="cautions">
      <p>Before {what}:</p>
      <ul className="plain-list">{CAUTIONS.map((line) => <li key={line}>{line}</li>)}</ul>
    </div>
  );
}
