import { useQuery } from '@tanstack/react-query';
import { Link } from 'react-router-dom';
import { listViews } from './api/list-views.js';
import { useDropView } from './api/drop-view.js';

/** The views that the reader has kept. */
export function KeptViews({ query }: { query: string }) {
  const { data } = useQuery(listViews());
  const drop = useDropView();
  if (!data || data.items.length === 0) return null;
  return (
    <ul className="plain-list kept-views" aria-label="Kept views">
      {data.items.map((view) => {
        const current = view.query === query;
        return (
          <li key={view.id}>
            <Link to={`/register${view.query ? `?${view.query}` : ''}`} aria-current={current ? 'true' : undefined}>{view.name}</Link>
            {current && <button type="button" className="text-button" onClick={() => drop.mutate(view.id)}>drop<span className="hidden-text"> the view {view.name}</span></button>}
          </li>
        );
      })}
    </ul>
  );
}
