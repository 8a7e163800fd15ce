/** The signature: rail A solid, rail B double, two ties that hold and one that stops short of B. */
export function Mark({ size = 26, moving = false }: { size?: number; moving?: boolean }) {
  return (
    <svg className={moving ? 'mark mark-moving' : 'mark'} width={size} height={size} viewBox="0 0 26 26" aria-hidden="true">
      <rect x="4" y="1" width="4" height="24" fill="var(--rail-a)" />
      <path d="M18 1v24M22 1v24" stroke="var(--rail-b)" strokeWidth="2.4" />
      <path className="mark-tie" d="M8 6h10" stroke="var(--air)" strokeWidth="2.4" />
      <path className="mark-tie" d="M8 13h5.5" stroke="var(--air)" strokeWidth="2.4" />
      <path className="mark-tie" d="M8 20h10" stroke="var(--air)" strokeWidth="2.4" />
      <path className="mark-stub" d="M17.6 14.6l-3.4-.9" stroke="var(--broken)" strokeWidth="2.6" />
    </svg>
  );
}
