import { STAGE_LABELS, STAGE_LINE, type Stage } from '#shared/vocabulary';

function standingOf(index: number, at: number): string {
  if (index < at) return 'stop past';
  return index === at ? 'stop now' : 'stop';
}

/** The track of stages, filled to where the issue stands; waived and withdrawn leave it by a siding. */
export function StageLine({ stage, note }: { stage: Stage; note?: string | undefined }) {
  const at = (STAGE_LINE as readonly Stage[]).indexOf(stage);
  return (
    <ol className="stage-line" aria-label="Stage">
      {STAGE_LINE.map((name, k) => (
        <li key={name} className={standingOf(k, at)} aria-current={k === at ? 'step' : undefined}>
          <span>{STAGE_LABELS[name]}{k < at && <span className="hidden-text">, passed</span>}</span>
        </li>
      ))}
      {at < 0 && (
        <li className="stop siding now" aria-current="step"><span>{STAGE_LABELS[stage]}{note ? <small>{note}</small> : null}</span></li>
      )}
    </ol>
  );
}
