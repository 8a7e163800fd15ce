import { reading } from '../../../lib/query.js';

export const listViews = () => reading('listViews', {});
