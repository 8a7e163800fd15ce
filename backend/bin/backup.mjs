import { maintain } from './launch/maintenance.mjs';

await maintain('backup', { needs: 'DATABASE_BACKUP_URL' });
