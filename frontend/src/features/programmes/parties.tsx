import { useState } from 'react';
import type { Programme } from '#shared/api/people';
import { Section } from '../../components/ui/section.js';
import { counted } from '../../lib/units.js';
import { AddPartyForm } from './add-party-form.js';

/** The programme's parties and the parts that they play. */
export function PartyTable({ programme }: { programme: Programme }) {
  const [adding, add] = useState(false);
  return (
    <Section title="Parties" aside={counted(programme.parties.length, 'party', 'parties')}
      end={programme.actions.addParty && !adding && <button type="button" className="text-button" onClick={() => add(true)}>Add a party</button>}>
      {adding && <AddPartyForm programme={programme.code} close={() => add(false)} />}
      <div className="sheet scroller" tabIndex={0} role="group" aria-label="Parties">
        <table className="data">
          <thead><tr><th scope="col">Party</th><th scope="col">Short</th><th scope="col">Parts</th><th scope="col" className="n">People</th></tr></thead>
          <tbody>{programme.parties.map((p) => <tr key={p.id}><td><b>{p.name}</b></td><td>{p.shortName}</td><td>{p.parts.join(', ')}</td><td className="n fig">{p.people}</td></tr>)}</tbody>
        </table>
      </div>
    </Section>
  );
}
