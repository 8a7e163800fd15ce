import { backUp } from '../ops/backup.js';
import { needed, runOpsCommand, say } from './ops-command.js';

/** npm run backup -- [FOLDER] */
await runOpsCommand(async () => {
  const stamp = new Date().toISOString().slice(0, 19).replace(/[-:]/g, '');
  const target = process.argv[2] ?? `crosstie-backup-${stamp}`;
  const manifest = await backUp({ backupUrl: needed('DATABASE_BACKUP_URL'), storageDir: needed('STORAGE_DIR'), target });
  const bytes = manifest.files.reduce((sum, file) => sum + file.bytes, manifest.database.bytes);
  say(`Backed up the database and ${manifest.files.length} files (${bytes} bytes) into ${target}`);
});
