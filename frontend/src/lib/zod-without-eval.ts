import { z } from 'zod';

// Imported before any schema is made: zod probes for `eval` otherwise, which the content
// security policy forbids and reports.
z.config({ jitless: true });
