import { Link } from 'react-router-dom';
import type { z } from 'zod';
import type { daySheet } from '#shared/api/overview';
import { Progress } from '../../../components/ui/progress.js';
import { addressOf } from '../../../lib/issue-name.js';

type Run = z.infer<typeof daySheet>['running'][number];

/** Decodes under way on the reader's issues. */
export function RunningDecodes({ items }: { items: readonly Run[] }) {
  return (
    <ul className="plain-list running-decodes">
      {items.map((r) => (
        <li key={r.decodeId}>
          <p><span className="fig soft">{r.programme}/{r.number}</span> <Link className="bare-link" to={addressOf(r)}>{r.title}</Link></p>
          <Progress part={r.progress} label={`Decode ${r.decodeNumber} of ${r.programme}/${r.number}`} />
          <p className="small">decode {r.decodeNumber}: {r.step}</p>
        </li>
      ))}
    </ul>
  );
}
