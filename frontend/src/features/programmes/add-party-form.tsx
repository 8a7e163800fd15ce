import { useState, type FormEvent } from 'react';
import { PARTS } from '#shared/vocabulary';
import { TextField } from '../../components/ui/field.js';
import { OpenedForm } from '../../components/ui/opened-form.js';
import { Check } from '../../components/ui/radios.js';
import { Refused } from '../../components/ui/refused.js';
import { useAddParty } from './api/add-party.js';

type Part = (typeof PARTS)[number];

export function AddPartyForm({ programme, close }: { programme: string; close: () => void }) {
  const add = useAddParty(programme);
  const [name, setName] = useState('');
  const [shortName, setShort] = useState('');
  const [parts, setParts] = useState<Part[]>([]);
  const send = (e: FormEvent): void => { e.preventDefault(); add.mutate({ name, shortName, parts }, { onSuccess: close }); };
  return (
    <OpenedForm className="panel mb-4" onSubmit={send} aria-label="Add a party">
      <div className="fields">
        <TextField label="Name" required maxLength={80} value={name} onChange={(e) => setName(e.target.value)} />
        <TextField label="Short name" required maxLength={24} hint="Stands in the register’s columns" value={shortName} onChange={(e) => setShort(e.target.value)} />
      </div>
      <fieldset className="choices"><legend className="legend">Parts</legend>
        {PARTS.map((part) => <Check key={part} checked={parts.includes(part)} onChange={(on) => setParts(on ? [...parts, part] : parts.filter((p) => p !== part))}>{part}</Check>)}
      </fieldset>
      <Refused error={add.error} />
      <div className="actions"><button type="submit" className="button button-main" disabled={add.isPending || parts.length === 0}>Add the party</button><button type="button" className="button" onClick={close}>Not now</button></div>
    </OpenedForm>
  );
}
