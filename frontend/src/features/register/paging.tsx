import type { RegisterPage } from '#shared/api/issues';

/** Where in the list the page stands, and the way on; how many there are is told once they are counted. */
export function Paging({ of: { page, size, items, more }, total, go }: { of: RegisterPage; total: number | undefined; go: (page: number) => void }) {
  if (page === 1 && !more) return null;
  const before = (page - 1) * size;
  return (
    <nav className="paging" aria-label="Pages of the register">
      <button type="button" className="button" disabled={page <= 1} onClick={() => go(page - 1)}>Back</button>
      {items.length > 0 && <span className="fig">{before + 1}–{before + items.length}{total === undefined ? '' : ` of ${total}`}</span>}
      <button type="button" className="button" disabled={!more} onClick={() => go(page + 1)}>On</button>
    </nav>
  );
}
