import { maintain } from './launch/maintenance.mjs';

await maintain('restore', { needs: 'DATABASE_OWNER_URL' });
