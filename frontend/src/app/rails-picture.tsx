const TIES = [58, 116, 174, 232, 348, 406, 464];

/** The signature at full height: ties between the rails, the air drawn along them, one tie short of B. */
export function RailsPicture() {
  return (
    <svg className="rails-picture" viewBox="0 0 220 520" preserveAspectRatio="xMidYMid slice" aria-hidden="true">
      <rect x="34" width="14" height="520" fill="var(--rail-a)" />
      <path d="M164 0v520M184 0v520" stroke="var(--rail-b)" strokeWidth="7" />
      {TIES.map((y) => <path key={y} d={`M48 ${y}H${160.5}`} stroke="var(--air)" strokeWidth="3.5" />)}
      <path d="M48 290H112" stroke="var(--air)" strokeWidth="3.5" />
      <path d="M160 301L130 293" stroke="var(--broken)" strokeWidth="6" />
      <path d="M104 0 C94 26 114 34 104 58 S94 92 104 116 114 150 104 174 94 208 104 232 114 262 104 290 94 320 104 348 114 378 104 406 94 440 104 464 114 496 104 520"
        fill="none" stroke="var(--rule-strong)" strokeWidth="1.2" />
    </svg>
  );
}
