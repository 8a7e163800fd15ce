import { reading } from '../../../lib/query.js';

export const readDecode = (decodeId: string) => reading('readDecode', { params: { decodeId } });
