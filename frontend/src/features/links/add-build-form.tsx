import { useState, type FormEvent } from 'react';
import { TextField } from '../../components/ui/field.js';
import { OpenedForm } from '../../components/ui/opened-form.js';
import { Refused } from '../../components/ui/refused.js';
import { useAddBuild } from './api/add-build.js';

/** A software load on a unit, under the label that its maker gave it. */
export function AddBuildForm({ unit, close }: { unit: { id: string; name: string }; close: () => void }) {
  const add = useAddBuild();
  const [label, setLabel] = useState('');
  const [note, setNote] = useState('');
  const send = (e: FormEvent): void => { e.preventDefault(); add.mutate({ unitId: unit.id, label, note }, { onSuccess: close }); };
  return (
    <OpenedForm className="panel mb-4" onSubmit={send} aria-label={`Add a build of ${unit.name}`}>
      <div className="fields">
        <TextField label={`Build of ${unit.name}`} required figures maxLength={60} value={label} onChange={(e) => setLabel(e.target.value)} />
        <TextField label="What changed in it" maxLength={500} value={note} onChange={(e) => setNote(e.target.value)} />
      </div>
      <Refused error={add.error} />
      <div className="actions"><button type="submit" className="button button-main" disabled={add.isPending}>Add the build</button><button type="button" className="button" onClick={close}>Not now</button></div>
    </OpenedForm>
  );
}
