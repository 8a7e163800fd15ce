import { restore } from '../ops/restore.js';
import { needed, runOpsCommand, say, UsageError } from './ops-command.js';

/** npm run restore -- FOLDER */
await runOpsCommand(async () => {
  const source = process.argv[2];
  if (!source) throw new UsageError('Name the backup: npm run restore -- FOLDER');
  const manifest = await restore({ source, ownerUrl: needed('DATABASE_OWNER_URL'), storageDir: needed('STORAGE_DIR') });
  say(`Restored the backup of ${manifest.madeAt}: the database and ${manifest.files.length} files. Start Crosstie with: npm start`);
});
