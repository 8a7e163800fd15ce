import { reading } from '../../../lib/query.js';

export const readDaySheet = () => reading('readDaySheet', {});
