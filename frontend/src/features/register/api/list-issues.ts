import type { z } from 'zod';
import type { registerQuery } from '#shared/api/issues';
import { reading } from '../../../lib/query.js';

export type RegisterState = z.input<typeof registerQuery>;

export const listIssues = (query: RegisterState) => reading('listIssues', { query });
