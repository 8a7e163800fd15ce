import type { HintSide } from '#shared/vocabulary';

type State = 'none' | 'running' | 'clean' | 'hint' | 'failed';

/** The tie of one register row: whole when the decode was clean, short of the side at odds, dotted before it ended. */
function Tie({ state, side }: { state: State; side: HintSide | null }) {
  if (state === 'clean') return <path d="M4 8h11" stroke="var(--air)" strokeWidth="2" />;
  if (state === 'running') return <path d="M4.5 8h10" stroke="var(--air)" strokeWidth="2" strokeDasharray="2 1.8" />;
  if (state !== 'hint') return null;
  const short = { a: 'M10 8h5', b: 'M4 8h5', both: 'M8 8h3.4', unknown: 'M4 8h3M12 8h3', capture: 'M4 8h3M12 8h3' }[side ?? 'unknown'];
  return (
    <>
      <path d={short} stroke="var(--air)" strokeWidth="2" />
      {(side === 'a' || side === 'both') && <path d="M4.2 9.4l3-1.2" stroke="var(--broken)" strokeWidth="2.2" />}
      {(side === 'b' || side === 'both') && <path d="M14.6 9.4l-3-1.2" stroke="var(--broken)" strokeWidth="2.2" />}
      {(side === 'unknown' || side === 'capture') && <path d="M8 9.4l3-2.6" stroke="var(--broken)" strokeWidth="2.2" />}
    </>
  );
}

export function MiniTie({ state, side }: { state: State; side: HintSide | null }) {
  return (
    <svg className="mini-tie" width="20" height="16" viewBox="0 0 20 16" aria-hidden="true">
      <rect x="1" width="3" height="16" fill="var(--rail-a)" />
      <path d="M15.6 0v16M18.8 0v16" stroke="var(--rail-b)" strokeWidth="1.5" />
      <Tie state={state} side={side} />
    </svg>
  );
}
