import { useState, type FormEvent } from 'react';
import type { Unit } from '#shared/api/links';
import { INTERFACES, type LinkInterface } from '#shared/vocabulary';
import { Select, TextField, type Option } from '../../components/ui/field.js';
import { OpenedForm } from '../../components/ui/opened-form.js';
import { Refused } from '../../components/ui/refused.js';
import { useAddLink } from './api/add-link.js';

const megahertz = (text: string): number | null => {
  const value = Number(text.replace(',', '.')) * 1e6;
  return text.trim() && Number.isFinite(value) && value > 0 ? value : null;
};

/** A link joins two units over one interface; which is side A is the programme's own choice and stays. */
export function AddLinkForm({ programme, units, close }: { programme: string; units: readonly Unit[]; close: () => void }) {
  const add = useAddLink();
  const [given, setGiven] = useState({ name: '', interface: 'air' as LinkInterface, unitAId: '', unitBId: '', centre: '' });
  const set = (name: keyof typeof given) => (e: { target: { value: string } }): void => setGiven((g) => ({ ...g, [name]: e.target.value }));
  const options = units.map((u): Option => [u.id, `${u.party.shortName} ${u.name}, ${u.part}`]);
  const send = (e: FormEvent): void => {
    e.preventDefault();
    const { centre, ...rest } = given;
    add.mutate({ programme, ...rest, centreFrequencyHz: megahertz(centre) }, { onSuccess: close });
  };
  return (
    <OpenedForm className="panel mb-4" onSubmit={send} aria-label="Add a link">
      <div className="fields">
        <TextField label="Name" required maxLength={120} hint="Where it stands, so that people know it" value={given.name} onChange={set('name')} />
        <Select label="Interface" value={given.interface} options={INTERFACES.map((i): Option => [i, i === 'wifi' ? 'Wi‑Fi' : i])} onChange={set('interface')} />
        <Select label="Side A" required none="choose a unit" value={given.unitAId} options={options} onChange={set('unitAId')} />
        <Select label="Side B" required none="choose a unit" value={given.unitBId} options={options.filter(([id]) => id !== given.unitAId)} onChange={set('unitBId')} />
        <TextField label="Centre, MHz" figures inputMode="decimal" hint="May be left out" value={given.centre} onChange={set('centre')} />
      </div>
      <Refused error={add.error} />
      <div className="actions"><button type="submit" className="button button-main" disabled={add.isPending}>Add the link</button><button type="button" className="button" onClick={close}>Not now</button></div>
    </OpenedForm>
  );
}
