import { reading } from '../../../lib/query.js';

export const readOverview = (programme: string) => reading('readOverview', { params: { programme } });
