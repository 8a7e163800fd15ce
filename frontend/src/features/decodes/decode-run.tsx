import type { Decode, DecodeSummary } from '#shared/api/decodes';
import { DECODE_STEPS, type DecodeStep } from '#shared/vocabulary';
import { Progress } from '../../components/ui/progress.js';
import { When } from '../../components/ui/when.js';

const STEPS: readonly DecodeStep[] = DECODE_STEPS.filter((step) => step !== 'done');
const WORDS: Record<string, string> = {
  waiting: 'Waiting', reading: 'Reading', numerology: 'Numerology', synchronisation: 'Synchronisation',
  'under A': 'Under A', 'under B': 'Under B', comparison: 'Comparison',
};

/** A decode under way: the step that it is at, as the worker reports it. It runs on whether or not the page is open. */
export function DecodeRun({ decode }: { decode: Decode | DecodeSummary }) {
  const at = STEPS.indexOf(decode.step);
  return (
    <section className="sheet decode-run" aria-label={`Decode ${decode.number}`}>
      <p><b>Decode {decode.number} {decode.state === 'queued' ? 'is waiting for a free worker' : 'is running'}</b> <span className="small">{decode.captureName ?? 'snapshots alone'} · asked for by {decode.requestedBy}, <When at={decode.queuedAt} />. You may leave the page; it goes on.</span></p>
      <Progress part={decode.progress} label={`Decode ${decode.number}, ${decode.step}`} />
      <ol className="decode-steps">
        {STEPS.map((step, k) => <li key={step} className={k < at ? 'past' : k === at ? 'now' : ''} aria-current={k === at ? 'step' : undefined}>{WORDS[step]}</li>)}
      </ol>
    </section>
  );
}

/** A decode that could not read its inputs: what, where, and what to do, in the engine's words. */
export function DecodeFailed({ decode }: { decode: DecodeSummary }) {
  return (
    <div className="notice broken" role="status">
      <b>Decode {decode.number} could not run.</b> {decode.error?.message ?? 'It gave no reason.'}
      {decode.inputWithdrawn && ' A file that it used has been withdrawn since.'}
    </div>
  );
}
