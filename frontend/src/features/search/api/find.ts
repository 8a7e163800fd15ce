import { reading } from '../../../lib/query.js';

/** Issues in which the words, a number or a value stand. */
export const find = (q: string) => reading('find', { query: { q } });
