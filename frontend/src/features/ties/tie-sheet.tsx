import { useState, type ReactNode } from 'react';
import type { AirValue, ComparisonRow, Hint } from '#shared/decode';
import { Section } from '../../components/ui/section.js';
import { counted } from '../../lib/units.js';
import { countOf, inOrder, type Tied } from './standing.js';
import { TieRow } from './tie-row.js';

/** Shown beside a value: the display name of the file that it stands in, where the reader may see it. */
export interface SnapshotNames { a: string | null; b: string | null }
const SHORT_ENOUGH = 4;
const MOST_HANGING = 5;

function tally(ties: readonly Tied[]): string {
  const off = countOf(ties, 'off-standard');
  return [`${countOf(ties, 'broken')} broken`, off ? `${off} off standard` : '', counted(countOf(ties, 'hangs'), 'hangs', 'hang'), counted(countOf(ties, 'holds'), 'holds', 'hold')]
    .filter(Boolean).join(' · ');
}

/** What shows at once: all that is broken or off standard, some that hang, a few that hold. */
function shortList(ties: readonly Tied[]): readonly Tied[] {
  const of = (...kinds: Tied['standing']['kind'][]): Tied[] => ties.filter((t) => kinds.includes(t.standing.kind));
  const odd = of('broken', 'off-standard');
  const hanging = of('hangs').slice(0, MOST_HANGING);
  const holding = of('holds');
  const some = holding.slice(0, odd.length + hanging.length > 0 ? 2 : SHORT_ENOUGH);
  const short = [...odd, ...hanging, ...some];
  return ties.length - short.length < 2 ? ties : short;
}

function folded(ties: readonly Tied[], short: readonly Tied[]): string {
  const more = (kind: Tied['standing']['kind']): number => countOf(ties, kind) - countOf(short, kind);
  return [more('hangs') ? `${more('hangs')} more that hang` : '', more('holds') ? `${more('holds')} more that hold` : ''].filter(Boolean).join(', ');
}

function Head() {
  return (
    <thead role="rowgroup">
      <tr role="row">
        <th role="columnheader" scope="col" className="tie-name">Parameter</th>
        <th role="columnheader" scope="col" className="tie-a">A declares</th>
        <th role="columnheader" scope="col" className="tie-air">On the air</th>
        <th role="columnheader" scope="col" className="tie-b">B declares</th>
        <th role="columnheader" scope="col" className="tie-clause">Clause</th>
      </tr>
    </thead>
  );
}

/** Rail A, the air, rail B: one tie for each setting. What holds folds away once it would fill the sheet; on paper nothing is folded. */
export function TieSheet({ rows, hints, air, files, note }: {
  rows: readonly ComparisonRow[]; hints: readonly Hint[]; air: Record<string, AirValue>; files: SnapshotNames; note: ReactNode;
}) {
  const [unfolded, unfold] = useState(false);
  const [places, showPlaces] = useState(false);
  const ties = inOrder(rows, hints);
  const short = shortList(ties);
  const folds = short.length < ties.length;
  const more = new Set(ties.filter((tie) => !short.includes(tie)));
  return (
    <Section title="Tie sheet" aside={tally(ties)}
      end={<button type="button" className="text-button" aria-pressed={places} onClick={() => showPlaces(!places)}>{places ? 'Hide where each value stood' : 'Show where each value stood'}</button>}>
      <div className="sheet">
        <table className={places ? 'ties with-places' : 'ties'} role="table" aria-label="Tie sheet: what each side declares and what the air shows">
          <Head />
          <tbody role="rowgroup">
            {ties.map((tie) => <TieRow key={tie.row.parameter} {...tie} air={air} files={files} places={places} folded={!unfolded && more.has(tie)} />)}
          </tbody>
        </table>
        <div className="ties-foot">
          {folds ? <button type="button" className="text-button no-print" aria-expanded={unfolded} onClick={() => unfold(!unfolded)}>{unfolded ? 'Fold what holds and hangs' : folded(ties, short)}</button> : <span />}
          <span>{note}</span>
        </div>
      </div>
    </Section>
  );
}
