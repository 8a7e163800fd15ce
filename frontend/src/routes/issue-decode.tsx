import { useQuery } from '@tanstack/react-query';
import { useState, type ReactNode } from 'react';
import type { Issue } from '#shared/api/issues';
import type { Decode, DecodeSummary, IssueHint } from '#shared/api/decodes';
import type { StoredFile } from '#shared/api/files';
import { Loading } from '../components/ui/loading.js';
import { Section } from '../components/ui/section.js';
import { Unread } from '../components/ui/unread.js';
import { readDecode } from '../features/decodes/api/read-decode.js';
import { DecodeChoice } from '../features/decodes/decode-list.js';
import { DecodeFailed, DecodeRun } from '../features/decodes/decode-run.js';
import { Evidence } from '../features/decodes/evidence.js';
import { Findings } from '../features/decodes/findings.js';
import { LookNext, NoMismatch } from '../features/decodes/no-mismatch.js';
import { RequestDecode } from '../features/decodes/request-decode.js';
import { HintCard } from '../features/hints/hint-card.js';
import { TieSheet } from '../features/ties/tie-sheet.js';

const running = (d: DecodeSummary): boolean => d.state === 'queued' || d.state === 'running';

/** The name of a side's snapshot, where the reader may see the file. */
function snapshotName(issue: Issue, side: 'a' | 'b'): string | null {
  const own = issue.files.filter((f): f is StoredFile => 'id' in f && f.kind === 'snapshot' && f.side === side && f.withdrawnAt === null);
  return own.at(-1)?.name ?? null;
}

function reachNote(issue: Issue): string {
  const compared = issue.files.filter((f) => f.kind === 'snapshot' && f.reach === 'compare-only');
  if (compared.length === 0) return '';
  return compared.length > 1 ? 'Both snapshots are shared as compare only' : 'One snapshot is shared as compare only';
}

/** The decode that the page shows: the chosen one, else the latest that has ended. */
function useShownDecode(issue: Issue) {
  const [chosen, choose] = useState<string | null>(null);
  const ended = issue.decodes.filter((d) => d.state === 'done').toSorted((x, y) => y.number - x.number);
  const shown = chosen ?? ended[0]?.id ?? null;
  const { data, error, refetch } = useQuery({ ...readDecode(shown ?? ''), enabled: shown !== null });
  return { shown, choose, ended, decode: data ?? null, error, again: refetch };
}

function Running({ summary }: { summary: DecodeSummary }) {
  const { data } = useQuery({ ...readDecode(summary.id), refetchInterval: 4000 });
  return <DecodeRun decode={data && running(data) ? data : summary} />;
}

function Hints({ hints }: { hints: readonly IssueHint[] }) {
  return <section aria-label="Likely mismatch" className="hints">{hints.map((h, k) => <HintCard key={h.id} hint={h} first={k === 0} />)}</section>;
}

function Shown({ issue, decode, between }: { issue: Issue; decode: Decode; between: ReactNode }) {
  const { result, hints } = decode;
  if (!result) return <>{between}</>;
  return (
    <>
      {decode.inputWithdrawn && <p className="notice waits mb-4">A file that decode {decode.number} used has been withdrawn since; what was derived from it is gone.</p>}
      {hints.length > 0 ? <Hints hints={hints} /> : <NoMismatch number={decode.number} lookNext={result.lookNext} />}
      {result.comparison.length > 0 && <TieSheet rows={result.comparison} hints={hints} air={result.air} files={{ a: snapshotName(issue, 'a'), b: snapshotName(issue, 'b') }} note={reachNote(issue)} />}
      <Evidence decode={decode} />
      {between}
      <Findings result={result} />
      {hints.length > 0 && result.lookNext.length > 0 && <section className="section sheet no-mismatch"><LookNext lookNext={result.lookNext} /></section>}
    </>
  );
}

/** What runs, what was found, and the way to ask for more. `between` stands between the evidence and the long tables. */
export function IssueDecode({ issue, between }: { issue: Issue; between: ReactNode }) {
  const { shown, choose, ended, decode, error, again } = useShownDecode(issue);
  const [asking, ask] = useState(false);
  const newest = issue.decodes.toSorted((x, y) => y.number - x.number)[0];
  return (
    <>
      {issue.decodes.filter(running).map((d) => <Running key={d.id} summary={d} />)}
      {newest?.state === 'failed' && <DecodeFailed decode={newest} />}
      {decode && <Shown issue={issue} decode={decode} between={between} />}
      {issue.decodes.length === 0 && <Section title="Decode"><p className="sheet empty">No decode yet. Put a capture or the snapshots of both sides on the issue, then decode them.</p></Section>}
      {shown && !decode && (error ? <Unread what="The decode" error={error} again={again} /> : <div className="sheet decode-awaited"><Loading what="Reading the decode" /></div>)}
      {!decode && between}
      <div className="decode-tools no-print">
        {shown && <DecodeChoice decodes={ended} shown={shown} choose={choose} />}
        {issue.actions.decode && !asking && <button type="button" className="button" onClick={() => ask(true)}>{issue.decodes.length ? 'Decode again' : 'Decode'}</button>}
      </div>
      {asking && <div className="section"><RequestDecode issue={issue} close={() => ask(false)} /></div>}
    </>
  );
}
