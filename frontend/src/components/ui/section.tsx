import { useId, type ReactNode } from 'react';

/** A part of a page under its heading, with what it holds beside the heading and its actions at the end. */
export function Section({ title, aside, end, children, className }: { title: ReactNode; aside?: ReactNode; end?: ReactNode; children: ReactNode; className?: string }) {
  const id = useId();
  return (
    <section aria-labelledby={id} className={`section ${className ?? ''}`}>
      <div className="section-head">
        <h2 id={id}>{title}</h2>
        {aside && <span className="small">{aside}</span>}
        {end && <span className="end">{end}</span>}
      </div>
      {children}
    </section>
  );
}
