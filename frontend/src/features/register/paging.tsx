/** Where in the list the page stands, and the way on. */
export function Paging({ page, size, total, go }: { page: number; size: number; total: number; go: (page: number) => void }) {
  const pages = Math.max(1, Math.ceil(total / size));
  if (total === 0 || pages === 1) return null;
  return (
    <nav className="paging" aria-label="Pages of the register">
      <button type="button" className="button" disabled={page <= 1} onClick={() => go(page - 1)}>Back</button>
      <span className="fig">{(page - 1) * size + 1}–{Math.min(total, page * size)} of {total}</span>
      <button type="button" className="button" disabled={page >= pages} onClick={() => go(page + 1)}>On</button>
    </nav>
  );
}
