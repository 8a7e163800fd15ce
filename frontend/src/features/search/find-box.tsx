import { keepPreviousData, useQuery } from '@tanstack/react-query';
import { useId, useState, type KeyboardEvent } from 'react';
import { useNavigate } from 'react-router-dom';
import type { z } from 'zod';
import type { found } from '#shared/api/overview';
import { STAGE_LABELS } from '#shared/vocabulary';
import { find } from './api/find.js';
import { useSettled } from './settled.js';

type Found = z.infer<typeof found>['items'][number];
const SHORTEST = 2;
const addressOf = (item: Found): string => `/issues/${item.programme}/${item.number}`;

function Results({ id, items, active, term, open }: { id: string; items: Found[]; active: number; term: string; open: (to: string) => void }) {
  return (
    <ul id={id} role="listbox" aria-label="Found" className="find-results">
      {items.map((item, k) => (
        <li key={addressOf(item)} id={`${id}-${k}`} role="option" aria-selected={k === active}
          onMouseDown={(e) => { e.preventDefault(); open(addressOf(item)); }}>
          <span className="fig">{item.programme}/{item.number}</span> {item.title}
          <small>{STAGE_LABELS[item.stage]} · {item.where}</small>
        </li>
      ))}
      {items.length === 0 && <li role="option" aria-selected={false} aria-disabled="true">Nothing that you can open holds “{term}”.</li>}
    </ul>
  );
}

/** The find box of the header: arrows walk the results, Enter opens one or takes the words to the register. */
export function FindBox() {
  const [text, setText] = useState('');
  const [active, setActive] = useState(-1);
  const [open, setOpen] = useState(false);
  const term = useSettled(text.trim());
  const id = useId();
  const navigate = useNavigate();
  const { data } = useQuery({ ...find(term), enabled: term.length >= SHORTEST, placeholderData: keepPreviousData });
  const items = term.length >= SHORTEST ? data?.items ?? null : null;
  const shown = open && items !== null;

  const go = (to: string): void => { setOpen(false); setText(''); void navigate(to); };
  const enter = (): void => {
    const number = /^([A-Za-z]{2,5})[/ -](\d{4})$/.exec(text.trim());
    const chosen = items?.[active];
    if (chosen) go(addressOf(chosen));
    else if (number) go(`/issues/${number[1]!.toUpperCase()}/${number[2]}`);
    else if (text.trim()) go(`/register?standing=any&text=${encodeURIComponent(text.trim())}`);
  };
  const onKey = (e: KeyboardEvent): void => {
    if (e.key === 'Enter') { e.preventDefault(); enter(); }
    if (e.key === 'Escape') setOpen(false);
    if (!items?.length || (e.key !== 'ArrowDown' && e.key !== 'ArrowUp')) return;
    e.preventDefault();
    setOpen(true);
    setActive((k) => (k + (e.key === 'ArrowDown' ? 1 : -1) + items.length + (k < 0 && e.key === 'ArrowUp' ? 1 : 0)) % items.length);
  };

  return (
    <div className="find" role="search">
      <input type="search" role="combobox" aria-label="Find by word, number or value" placeholder="Find by word, number or value"
        aria-expanded={shown} aria-controls={shown ? `${id}-found` : undefined} aria-autocomplete="list" autoComplete="off"
        aria-activedescendant={shown && active >= 0 ? `${id}-found-${active}` : undefined}
        value={text} onKeyDown={onKey} onFocus={() => setOpen(true)} onBlur={() => setOpen(false)}
        onChange={(e) => { setText(e.target.value); setActive(-1); setOpen(true); }} />
      {shown && <Results id={`${id}-found`} items={items} active={active} term={term} open={go} />}
    </div>
  );
}
