import { createProviderApp } from './server.js';
import { readSettings } from './settings.js';

const settings = readSettings();
const server = createProviderApp(settings).listen(settings.port, '127.0.0.1');
server.on('error', (error) => {
  process.stderr.write(`The identity provider cannot listen on port ${settings.port}: ${error.message}\n`);
  process.exit(1);
});
process.on('SIGTERM', () => {
  server.close(() => process.exit(0));
  server.closeAllConnections();
});
