import { useState } from 'react';
import type { Issue, PossibleMove } from '#shared/api/issues';
import type { PartyRef } from '#shared/api/common';
import { StageLine } from '../../components/marks/stage-line.js';
import { calendarDate } from '../../lib/times.js';
import { unsignedBy } from './waiver.js';
import { MoveForm } from './move-form.js';

/** The stage line, and under it the moves that the reader may make now; a blocked one says what it lacks. */
export function StageMoves({ issue, parties, formPlaces }: { issue: Issue; parties: readonly PartyRef[]; formPlaces: { retests: string } }) {
  const [chosen, choose] = useState<PossibleMove | null>(null);
  const blocked = issue.moves.filter((m) => m.blockedBy);
  const open = issue.moves.filter((m) => !m.blockedBy);
  const note = issue.stage === 'waived' && issue.waiver ? `until ${calendarDate(issue.waiver.endsOn)}` : undefined;
  return (
    <div className="stage-moves">
      <StageLine stage={issue.stage} note={note} />
      {issue.waiver?.pending && (
        <p className="notice waits">
          <b>A waiver is asked for</b> until {calendarDate(issue.waiver.endsOn)}. {unsignedBy(issue)}{' '}
          <a className="no-print" href={`#${formPlaces.retests}`}>{issue.waiver.actions.sign ? 'Read and sign it' : 'Read it'}</a>
        </p>
      )}
      {issue.moves.length > 0 && (
        <div className="moves no-print">
          <div className="actions">
            {open.map((move) => (
              <button key={move.to} type="button" className="button" aria-expanded={chosen?.to === move.to} onClick={() => choose(chosen?.to === move.to ? null : move)}>{move.label}</button>
            ))}
          </div>
          {blocked.length > 0 && (
            <ul className="plain-list small blocked-moves">
              {blocked.map((move) => <li key={move.to}><b>{move.label}</b>: {move.blockedBy} {move.requires.includes('clean-retest') && <a href={`#${formPlaces.retests}`}>Go to retests</a>}</li>)}
            </ul>
          )}
        </div>
      )}
      {chosen && <MoveForm key={chosen.to} issue={issue} move={chosen} parties={parties} close={() => choose(null)} />}
    </div>
  );
}
