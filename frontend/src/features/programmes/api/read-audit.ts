import type { z } from 'zod';
import type { auditQuery } from '#shared/api/people';
import { reading } from '../../../lib/query.js';

export const readAudit = (programme: string, query: z.input<typeof auditQuery>) => reading('readAudit', { params: { programme }, query });
