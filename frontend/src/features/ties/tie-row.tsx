import type { AirValue, ComparisonRow, Declared } from '#shared/decode';
import { parameterLabel, sameSetting, settingText } from '../../lib/settings.js';
import type { SnapshotNames } from './tie-sheet.js';
import type { End, Standing } from './standing.js';

/** The decode's own name for a parameter on the air; it carries the unit. */
const AIR_NAME = (parameter: string, air: Record<string, AirValue>): AirValue | undefined =>
  air[parameter] ?? air[`${parameter}Hz`] ?? air[`${parameter}S`];

function Place({ value, file, full }: { value: Declared; file: string | null; full: boolean }) {
  const line = value.line ? `${file ?? 'line '}${file ? ':' : ''}${value.line}` : file;
  if (full) return <span className="where">{[line, value.path, value.raw].filter(Boolean).join('  ')}</span>;
  return line ? <span className="where">{line}</span> : null;
}

function DeclaredCell({ side, row, end, file, places }: { side: 'a' | 'b'; row: ComparisonRow; end: End; file: string | null; places: boolean }) {
  const value = row[side];
  const other = row[side === 'a' ? 'b' : 'a'];
  const classes = `tie-${side} ${end === 'broken' || end === 'off-standard' ? 'at-odds' : ''}`;
  if (!value) return <td role="cell" className={`${classes} silent`}>{other ? 'does not say' : '—'}</td>;
  // A compare-only snapshot's own row: that it is declared shows, what is declared does not.
  if (value.value === null) return <td role="cell" className={`${classes} silent`}>declared by side {side.toUpperCase()}</td>;
  const odd = end !== 'whole';
  return (
    <td role="cell" className={classes}>
      <span className="fig">{settingText(row.parameter, value.value)}</span>
      {(odd || places || row.verdict !== 'agree') && <Place value={value} file={file} full={places} />}
    </td>
  );
}

/** What the air shows, and how that is known. Where broadcast and measurement differ, both stand there. */
function AirWords({ row, measured }: { row: ComparisonRow; measured: AirValue | undefined }) {
  const { air, announced } = row;
  if (air === null && announced === null) return <span className="air-none">{measured?.reason ? 'not determinable' : 'not seen'}</span>;
  if (air === null) return <span className="fig">{settingText(row.parameter, announced)}<span className="how">announced</span></span>;
  const both = announced !== null && sameSetting(announced, air);
  return (
    <span className="fig">
      {settingText(row.parameter, air)}<span className="how">{both ? 'measured, announced' : 'measured'}</span>
      {announced !== null && !both && <> · {settingText(row.parameter, announced)}<span className="how">announced</span></>}
    </span>
  );
}

/** One setting as a tie between the rails; the words say again what the drawing shows. */
export function TieRow({ row, standing, air, files, places, folded }: {
  row: ComparisonRow; standing: Standing; air: Record<string, AirValue>; files: SnapshotNames; places: boolean; folded: boolean;
}) {
  const measured = AIR_NAME(row.parameter, air);
  const seen = row.air !== null || row.announced !== null;
  return (
    <tr role="row" className={`tie is-${standing.kind} ${folded ? 'folded' : ''}`}>
      <th role="rowheader" scope="row" className="tie-name">
        {parameterLabel(row.parameter)}
        {standing.kind === 'holds' ? <span className="hidden-text">, holds</span> : <span className="standing">{standing.words}</span>}
      </th>
      <DeclaredCell side="a" row={row} end={standing.a} file={files.a} places={places} />
      <td role="cell" className="tie-air">
        <span className={`air-line ${seen ? 'seen' : 'unseen'}`}>
          <i className={`lead lead-a ${standing.a}`} />
          <span className="air-value"><AirWords row={row} measured={measured} /></span>
          <i className={`lead lead-b ${standing.b}`} />
        </span>
        {places && (measured?.method || measured?.reason || row.note) && <span className="where">{[measured?.method, measured?.reason, row.note].filter(Boolean).join('; ')}</span>}
      </td>
      <DeclaredCell side="b" row={row} end={standing.b} file={files.b} places={places} />
      <td role="cell" className="tie-clause">{row.clause?.replace(/^TS /, '')}</td>
    </tr>
  );
}
