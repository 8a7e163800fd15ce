import { reading } from '../../../lib/query.js';

export const listMySessions = () => reading('listMySessions', {});
