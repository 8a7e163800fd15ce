import { reading } from '../../../lib/query.js';

export const listUnits = (programme: string | undefined) => reading('listUnits', { query: programme ? { programme } : {} });
