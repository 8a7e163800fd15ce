import type { DecodeSummary } from '#shared/api/decodes';
import { Select } from '../../components/ui/field.js';
import { instant } from '../../lib/times.js';

const standing = (d: DecodeSummary): string =>
  d.state === 'done' ? (d.finishedAt ? instant(d.finishedAt) : 'done') : d.state === 'failed' ? 'could not run' : d.state === 'queued' ? 'waiting' : 'running';

/** Which decode the page shows; every one is kept. */
export function DecodeChoice({ decodes, shown, choose }: { decodes: readonly DecodeSummary[]; shown: string; choose: (id: string) => void }) {
  if (decodes.length < 2) return null;
  const options = decodes.map((d) => [d.id, `Decode ${d.number}, ${d.captureName ?? 'snapshots alone'}, ${standing(d)}${d.inputWithdrawn ? ', a file withdrawn since' : ''}`] as const);
  return <Select label="Shown below" value={shown} options={options} onChange={(e) => choose(e.target.value)} />;
}
