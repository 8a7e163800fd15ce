import { Link } from 'react-router-dom';
import type { RegisterRow } from '#shared/api/issues';
import type { DaySheet } from '#shared/api/overview';
import { MiniStage } from '../../../components/marks/mini-stage.js';
import { MiniTie } from '../../../components/marks/mini-tie.js';
import { SideMark } from '../../../components/marks/side-mark.js';
import { hintSideWords, hintWords } from '../../../lib/hint-words.js';
import { addressOf } from '../../../lib/issue-name.js';
import { calendarDay, days } from '../../../lib/times.js';
import { probability } from '../../../lib/units.js';

function Due({ row }: { row: RegisterRow }) {
  const move = row.nextMove;
  if (!move?.due) return <span className="soft">no date</span>;
  return <span className={move.late ? 'late' : 'due'}>{move.late ? 'was due ' : 'due '}{calendarDay(move.due)}</span>;
}

/** One issue that waits for the reader's party: enough to decide whether to open it now. */
export function WaitingItem({ row }: { row: DaySheet['waitingForParty'][number] }) {
  return (
    <li className="waiting-item">
      <MiniTie state={row.decodeState} side={row.hint?.side ?? null} />
      <div>
        <p><span className="fig soft">{row.programme}/{row.number}</span> <Link className="bare-link waiting-title" to={addressOf(row)}>{row.title}</Link></p>
        {row.ask && <p className="waiting-ask"><span className="soft">asked to</span> {row.ask}</p>}
        <p className="small waiting-facts">
          <span className={row.severity === 'critical' ? 'hot severe' : ''}>{row.severity}</span>
          <SideMark side="a">{row.a.shortName}</SideMark><SideMark side="b">{row.b.shortName}</SideMark>
          <MiniStage stage={row.stage} />
          {row.hint && <span>{hintWords(row.hint.code)}, {hintSideWords(row.hint.side)}, <span className="fig">{probability(row.hint.confidence)} %</span></span>}
        </p>
      </div>
      <p className="waiting-due"><Due row={row} />{row.waitingDays !== null && <span className="small"> waits <span className="fig">{days(row.waitingDays)}</span></span>}</p>
    </li>
  );
}
