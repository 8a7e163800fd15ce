import { useState, type FormEvent } from 'react';
import type { PartyRef } from '#shared/api/common';
import { PARTS } from '#shared/vocabulary';
import { Select, TextField, type Option } from '../../components/ui/field.js';
import { OpenedForm } from '../../components/ui/opened-form.js';
import { Refused } from '../../components/ui/refused.js';
import { useAddUnit } from './api/add-unit.js';

export function AddUnitForm({ programme, parties, close }: { programme: string; parties: readonly PartyRef[]; close: () => void }) {
  const add = useAddUnit();
  const [given, setGiven] = useState({ partyId: '', name: '', part: 'radio unit' as (typeof PARTS)[number] });
  const send = (e: FormEvent): void => { e.preventDefault(); add.mutate({ programme, ...given }, { onSuccess: close }); };
  return (
    <OpenedForm className="panel mb-4" onSubmit={send} aria-label="Add a unit">
      <div className="fields">
        <Select label="Party" required none="choose a party" value={given.partyId} options={parties.map((p): Option => [p.id, p.name])} onChange={(e) => setGiven({ ...given, partyId: e.target.value })} />
        <TextField label="Name" required maxLength={80} value={given.name} onChange={(e) => setGiven({ ...given, name: e.target.value })} />
        <Select label="Part" value={given.part} options={PARTS.map((p): Option => [p, p])} onChange={(e) => setGiven({ ...given, part: e.target.value as (typeof PARTS)[number] })} />
      </div>
      <Refused error={add.error} />
      <div className="actions"><button type="submit" className="button button-main" disabled={add.isPending}>Add the unit</button><button type="button" className="button" onClick={close}>Not now</button></div>
    </OpenedForm>
  );
}
