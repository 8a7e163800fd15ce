import { useState } from 'react';
import type { Issue } from '#shared/api/issues';
import type { PartyRef } from '#shared/api/common';
import { When } from '../../components/ui/when.js';
import { calendarDay } from '../../lib/times.js';
import { NextMoveForm } from './next-move-form.js';

/** The one party that everyone is waiting for, what it is asked, since when and by when. */
export function NextMove({ issue, parties }: { issue: Issue; parties: readonly PartyRef[] }) {
  const [open, setOpen] = useState(false);
  const move = issue.nextMove;
  return (
    <section className="next-move" aria-labelledby="next-move">
      <h2 id="next-move" className="small">Next move</h2>
      {move ? (
        <>
          <p className="who-moves">{move.party.name}</p>
          <p className="small">
            {move.ask} · since <When at={move.since} as="weekday" />
            {move.due && <> · <span className={move.late ? 'late' : 'due'}>{move.late ? 'was due ' : 'due '}{calendarDay(move.due)}</span></>}
          </p>
        </>
      ) : <p className="small">Nobody is waited for.</p>}
      {issue.actions.setNextMove && !open && <button type="button" className="text-button" onClick={() => setOpen(true)}>{move ? 'Pass the next move' : 'Name the next move'}</button>}
      {open && <NextMoveForm issue={issue} parties={parties} close={() => setOpen(false)} />}
    </section>
  );
}
