import { reading } from '../../../lib/query.js';

export const listLinks = (programme: string | undefined) => reading('listLinks', { query: programme ? { programme } : {} });
