/**
 * Whether the words at `$?` find the issue `i` within the acting person's reach. Asked once for a query
 * and kept as a hash, so that a page still comes off the index of its order; a plain IN is joined first.
 */
export const IS_FOUND = 'coalesce(i.id in (select access.find_issues($?)), false)';
