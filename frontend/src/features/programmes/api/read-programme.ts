import { reading } from '../../../lib/query.js';

export const readProgramme = (programme: string) => reading('readProgramme', { params: { programme } });
