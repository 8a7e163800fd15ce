/** A bar of the track, filled as far as the work has come. */
export function Progress({ part, label }: { part: number; label: string }) {
  const percent = Math.round(Math.min(1, Math.max(0, part)) * 100);
  return (
    <div className="progress" role="progressbar" aria-label={label} aria-valuemin={0} aria-valuemax={100} aria-valuenow={percent}>
      <i style={{ width: `${percent}%` }} />
    </div>
  );
}
