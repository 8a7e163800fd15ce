import { Link } from 'react-router-dom';
import type { RegisterCounts } from '#shared/api/issues';

/** Why the page is empty; said once the issues are counted, since only the counts tell. */
export function NothingHere({ counts }: { counts: RegisterCounts | undefined }) {
  if (!counts) return null;
  if (counts.all === 0) return <p className="sheet empty">No issue yet.</p>;
  if (counts.matching > 0) return <p className="sheet empty">The list ends before this page.</p>;
  return <p className="sheet empty">No issue fits the sentence above. Change one of its phrases, or <Link to="/register?standing=any">show all</Link></p>;
}
