import { reading } from '../../../lib/query.js';
import type { RegisterState } from './list-issues.js';

/** How many issues there are: asked once for each filter, whatever the page and the order. */
export function countIssues({ page: _page, size: _size, sort: _sort, order: _order, ...filter }: RegisterState) {
  return reading('countIssues', { query: filter });
}
