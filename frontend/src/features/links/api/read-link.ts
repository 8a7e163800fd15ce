import { reading } from '../../../lib/query.js';

export const readLink = (linkId: string) => reading('readLink', { params: { linkId } });
