import { flexRender, getCoreRowModel, useReactTable, type Header, type Row } from '@tanstack/react-table';
import { type KeyboardEvent, type MouseEvent } from 'react';
import { useNavigate } from 'react-router-dom';
import type { RegisterRow } from '#shared/api/issues';
import { addressOf } from '../../lib/issue-name.js';
import type { RegisterState } from './api/list-issues.js';
import { COLUMNS, type Sort } from './columns.js';

interface RegisterTableProps { rows: RegisterRow[]; state: RegisterState; visible: Record<string, boolean>; sortBy: (sort: Sort) => void; stale: boolean }

function Heading({ header, state, sortBy }: { header: Header<RegisterRow, unknown>; state: RegisterState; sortBy: (sort: Sort) => void }) {
  const meta = header.column.columnDef.meta ?? {};
  const content = flexRender(header.column.columnDef.header, header.getContext());
  const sorted = meta.sort !== undefined && state.sort === meta.sort;
  const direction = state.order === 'desc' ? 'descending' : 'ascending';
  return (
    <th scope="col" role="columnheader" className={`${meta.className?.replace(' fig', '').replace(' soft', '') ?? ''} ${meta.figures ? 'n' : ''}`} aria-sort={sorted ? direction : undefined}>
      {meta.sort ? <button type="button" onClick={() => sortBy(meta.sort!)}>{content}<span aria-hidden="true" className="sort-mark">{sorted ? (direction === 'ascending' ? '↑' : '↓') : ''}</span></button> : content}
    </th>
  );
}

function BodyRow({ row, first }: { row: Row<RegisterRow>; first: boolean }) {
  const navigate = useNavigate();
  const to = addressOf(row.original);
  const open = (e: MouseEvent): void => { if (!(e.target as Element).closest('a') && !window.getSelection()?.toString()) void navigate(to); };
  const onKey = (e: KeyboardEvent): void => { if (e.key === 'Enter' && e.target === e.currentTarget) void navigate(to); };
  return (
    <tr role="row" tabIndex={first ? 0 : -1} onClick={open} onKeyDown={onKey} data-row={to} className={row.original.unseen ? 'unseen' : ''}>
      {row.getVisibleCells().map((cell) => {
        const meta = cell.column.columnDef.meta ?? {};
        return <td key={cell.id} role="cell" className={`${meta.className ?? ''} ${meta.figures ? 'n' : ''}`}>{flexRender(cell.column.columnDef.cell, cell.getContext())}</td>;
      })}
    </tr>
  );
}

/** Arrow keys, Home, End and the page keys walk the rows; Enter opens one. */
function walk(e: KeyboardEvent<HTMLElement>): void {
  const rows = [...e.currentTarget.querySelectorAll<HTMLElement>('tr[data-row]')];
  const at = rows.findIndex((row) => row.contains(document.activeElement));
  const to = { ArrowDown: at + 1, ArrowUp: at - 1, Home: 0, End: rows.length - 1, PageDown: at + 10, PageUp: at - 10 }[e.key];
  if (at < 0 || to === undefined) return;
  e.preventDefault();
  rows[Math.min(rows.length - 1, Math.max(0, to))]?.focus();
}

/** The table of all issues that the reader may see; sorted, filtered and paged by the server. */
export function RegisterTable({ rows, state, visible, sortBy, stale }: RegisterTableProps) {
  // oxlint-disable-next-line react/incompatible-library -- no React Compiler runs here; the table's functions are not memoised
  const table = useReactTable({
    data: rows, columns: COLUMNS, getCoreRowModel: getCoreRowModel(), state: { columnVisibility: visible },
    manualSorting: true, manualFiltering: true, manualPagination: true, getRowId: (row) => `${row.programme}/${row.number}`,
  });
  return (
    <table className={stale ? 'register stale' : 'register'} role="table" aria-label="Issues" aria-busy={stale}>
      <thead role="rowgroup">
        {table.getHeaderGroups().map((group) => <tr key={group.id} role="row">{group.headers.map((header) => <Heading key={header.id} header={header} state={state} sortBy={sortBy} />)}</tr>)}
      </thead>
      <tbody role="rowgroup" onKeyDown={walk}>{table.getRowModel().rows.map((row, k) => <BodyRow key={row.id} row={row} first={k === 0} />)}</tbody>
    </table>
  );
}
