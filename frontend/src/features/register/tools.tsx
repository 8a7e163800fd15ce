import { useState, type FormEvent } from 'react';
import { Popover, useClose } from '../../components/ui/popover.js';
import { Check } from '../../components/ui/radios.js';
import { Refused } from '../../components/ui/refused.js';
import { useKeepView } from './api/keep-view.js';
import { COLUMN_NAMES } from './columns.js';

/** Which columns show. */
export function ColumnChoice({ visible, change }: { visible: Record<string, boolean>; change: (visible: Record<string, boolean>) => void }) {
  return (
    <Popover label="Columns" toLeft openerClass="text-button" opener="Columns">
      {Object.entries(COLUMN_NAMES).map(([id, name]) => <Check key={id} checked={visible[id] ?? false} onChange={(on) => change({ ...visible, [id]: on })}>{name}</Check>)}
    </Popover>
  );
}

function KeepForm({ query }: { query: string }) {
  const close = useClose();
  const keep = useKeepView();
  const [name, setName] = useState('');
  const send = (e: FormEvent): void => { e.preventDefault(); keep.mutate({ name, query }, { onSuccess: close }); };
  return (
    <form onSubmit={send} className="field">
      <label htmlFor="view-name">Keep this view as</label>
      <input id="view-name" className="input" required maxLength={60} value={name} onChange={(e) => setName(e.target.value)} />
      <Refused error={keep.error} />
      <button type="submit" className="button" disabled={keep.isPending}>Keep</button>
    </form>
  );
}

/** Keeps what the address says under a name of the reader's own. */
export const KeepView = ({ query }: { query: string }) => (
  <Popover label="Keep this view" toLeft openerClass="text-button" opener="Keep this view"><KeepForm query={query} /></Popover>
);
