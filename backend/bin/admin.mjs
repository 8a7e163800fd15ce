import { maintain } from './launch/maintenance.mjs';

await maintain('admin', { needs: 'DATABASE_OWNER_URL' });
