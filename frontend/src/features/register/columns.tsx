import { createColumnHelper } from '@tanstack/react-table';
import { Link } from 'react-router-dom';
import type { RegisterRow, SORTS } from '#shared/api/issues';
import { MiniStage } from '../../components/marks/mini-stage.js';
import { MiniTie } from '../../components/marks/mini-tie.js';
import { SideMark } from '../../components/marks/side-mark.js';
import { hintSideWords, hintWords } from '../../lib/hint-words.js';
import { addressOf } from '../../lib/issue-name.js';
import { calendarDay, days, dateOf } from '../../lib/times.js';
import { probability } from '../../lib/units.js';

export type Sort = (typeof SORTS)[number];
interface ColumnMeta { sort?: Sort; figures?: boolean; className?: string }
declare module '@tanstack/react-table' {
  // oxlint-disable-next-line no-unused-vars -- the names are the library's
  interface ColumnMeta<TData, TValue> { sort?: Sort; figures?: boolean; className?: string }
}
const column = createColumnHelper<RegisterRow>();
const meta = (given: ColumnMeta): { meta: ColumnMeta } => ({ meta: given });

const TIE_WORDS = { none: 'no decode', running: 'decode running', clean: 'no mismatch found', hint: 'mismatch found', failed: 'decode could not run' } as const;

const SHORT_RUNGS: Record<string, string> = {
  'synchronisation block': 'block', 'random-access response': 'response', 'C-plane accepted': 'C‑plane',
  'downlink U-plane': 'DL U‑plane', 'PRACH U-plane': 'PRACH U‑pl.', 'uplink U-plane': 'UL U‑plane',
};

function LastRung({ row }: { row: RegisterRow }) {
  const { downlink, uplink } = row.lastRung;
  const [rung, arrow, direction] = uplink && uplink !== downlink ? [uplink, '↑', 'uplink'] : [downlink, uplink ? '↓↑' : '↓', uplink ? 'both directions' : 'downlink'];
  if (!rung) return null;
  return <span title={`${rung}, ${direction}`}>{SHORT_RUNGS[rung] ?? rung} <span aria-hidden="true">{arrow}</span><span className="hidden-text">, {direction}</span></span>;
}

function Mismatch({ row }: { row: RegisterRow }) {
  if (row.hint) return <>{hintWords(row.hint.code)}, {hintSideWords(row.hint.side)}</>;
  const words = { clean: 'no mismatch found', running: 'decode running', failed: 'decode could not run', none: '', hint: '' }[row.decodeState];
  return <span className="soft">{words}</span>;
}

/** The register's columns in their order; `meta.sort` names the server's order that a heading asks for. */
export const COLUMNS = [
  column.display({
    id: 'tie', header: () => <span className="hidden-text">Tie</span>, ...meta({ className: 'c-tie' }), enableHiding: false,
    cell: ({ row: { original: r } }) => <span title={TIE_WORDS[r.decodeState]}><MiniTie state={r.decodeState} side={r.hint?.side ?? null} /><span className="hidden-text">{TIE_WORDS[r.decodeState]}</span></span>,
  }),
  column.accessor('number', {
    header: 'Number', ...meta({ sort: 'number', className: 'c-number fig' }), enableHiding: false,
    cell: ({ row: { original: r } }) => <>{r.programme}/{r.number}{r.unseen && <span className="hidden-text">, changed since you looked</span>}</>,
  }),
  column.accessor('title', {
    header: 'What is wrong', ...meta({ className: 'c-title' }), enableHiding: false,
    cell: ({ row: { original: r } }) => <Link to={addressOf(r)} tabIndex={-1} className="row-link">{r.title}</Link>,
  }),
  column.display({
    id: 'between', header: 'Between', ...meta({ className: 'c-between' }),
    cell: ({ row: { original: r } }) => <span className="pair"><SideMark side="a">{r.a.shortName}</SideMark> <SideMark side="b">{r.b.shortName}</SideMark></span>,
  }),
  column.accessor((r) => r.link.name, { id: 'link', header: 'Link', ...meta({ className: 'c-link' }) }),
  column.accessor('severity', {
    header: 'Severity', ...meta({ sort: 'severity', className: 'c-severity' }),
    cell: ({ getValue }) => <span className={getValue() === 'critical' ? 'hot' : ''}>{getValue()}</span>,
  }),
  column.display({ id: 'rung', header: 'Last rung', ...meta({ className: 'c-rung soft' }), cell: ({ row }) => <LastRung row={row.original} /> }),
  column.accessor('stage', { header: 'Stage', ...meta({ sort: 'stage', className: 'c-stage' }), cell: ({ getValue }) => <MiniStage stage={getValue()} /> }),
  column.display({ id: 'mismatch', header: 'Likely mismatch', ...meta({ className: 'c-mismatch' }), cell: ({ row }) => <Mismatch row={row.original} /> }),
  column.accessor((r) => r.hint?.confidence, {
    id: 'sure', header: 'Sure', ...meta({ figures: true, className: 'c-sure fig' }),
    cell: ({ getValue }) => { const p = getValue(); return p === undefined ? null : `${probability(p)} %`; },
  }),
  column.accessor((r) => r.nextMove?.party.shortName, { id: 'move', header: 'Next move', ...meta({ className: 'c-move' }) }),
  column.accessor((r) => r.nextMove?.due, {
    id: 'due', header: 'Due', ...meta({ sort: 'due', figures: true, className: 'c-due' }),
    cell: ({ row: { original: r } }) => (r.nextMove?.due ? <span className={r.nextMove.late ? 'late' : ''}>{calendarDay(r.nextMove.due)}{r.nextMove.late && <span className="hidden-text">, late</span>}</span> : null),
  }),
  column.accessor('waitingDays', {
    id: 'waiting', header: 'Waiting', ...meta({ sort: 'waiting', figures: true, className: 'c-waiting fig' }),
    cell: ({ getValue }) => { const d = getValue(); return d === null ? null : days(d); },
  }),
  column.accessor('raisedAt', { id: 'raised', header: 'Raised', ...meta({ sort: 'raised', figures: true, className: 'c-raised' }), cell: ({ getValue }) => dateOf(getValue()) }),
  column.accessor('updatedAt', { id: 'updated', header: 'Changed', ...meta({ sort: 'updated', figures: true, className: 'c-updated' }), cell: ({ getValue }) => dateOf(getValue()) }),
];

export const COLUMN_NAMES: Record<string, string> = {
  between: 'Between', link: 'Link', severity: 'Severity', rung: 'Last rung', stage: 'Stage', mismatch: 'Likely mismatch',
  sure: 'Sure', move: 'Next move', due: 'Due', waiting: 'Waiting', raised: 'Raised', updated: 'Changed',
};
const HIDDEN_AT_FIRST = ['link', 'raised', 'updated'];

/** Which columns show: the address names them, else the usual ones. */
export function visibilityOf(columns: string | null): Record<string, boolean> {
  const named = columns?.split(',') ?? null;
  return Object.fromEntries(Object.keys(COLUMN_NAMES).map((id) => [id, named ? named.includes(id) : !HIDDEN_AT_FIRST.includes(id)]));
}
export function columnsText(visible: Record<string, boolean>): string | null {
  const shown = Object.keys(COLUMN_NAMES).filter((id) => visible[id]);
  const usual = Object.keys(COLUMN_NAMES).filter((id) => !HIDDEN_AT_FIRST.includes(id));
  return shown.join() === usual.join() ? null : shown.join();
}
