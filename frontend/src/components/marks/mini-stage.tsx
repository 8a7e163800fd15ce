import { STAGE_LABELS, STAGE_LINE, type Stage } from '#shared/vocabulary';

const STEP = 11;

/** The stage line, small: filled up to where the issue stands. A stage off the line leaves the track open. */
export function MiniStage({ stage }: { stage: Stage }) {
  const at = (STAGE_LINE as readonly Stage[]).indexOf(stage);
  const stops = STAGE_LINE.slice(0, -1).map((_, k) => k);
  return (
    <span className="mini-stage">
      <svg width="60" height="12" viewBox="0 0 60 12" aria-hidden="true">
        {stops.map((k) => (
          <rect key={k} x={k * STEP} width={STEP} y={k < at ? 4 : 5} height={k < at ? 4 : 2} fill={k < at ? 'var(--ink)' : 'var(--rule-strong)'} />
        ))}
        {at >= 0 && <rect x={at * STEP - (at > 0 ? 1 : 0)} width="5" height="12" fill="var(--ink)" />}
        {at < 0 && <path d="M23 1l10 10M33 1L23 11" stroke="var(--ink-soft)" strokeWidth="1.6" />}
      </svg>
      {STAGE_LABELS[stage]}
    </span>
  );
}
