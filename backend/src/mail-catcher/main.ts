import { z } from 'zod';
import { createMailPage, createSmtpCatcher } from './catcher.js';
import { KeptMail } from './kept-mail.js';

const port = z.coerce.number().int().min(1).max(65_535);
const settings = z.object({ MAIL_PAGE_PORT: port, MAIL_SMTP_PORT: port, MAIL_DIR: z.string().min(1) }).parse(process.env);

function giveUp(what: string) {
  return (error: Error) => {
    process.stderr.write(`The mail catcher's ${what} failed: ${error.message}\n`);
    process.exit(1);
  };
}

const kept = new KeptMail(settings.MAIL_DIR);
const smtp = createSmtpCatcher(kept);
// A client that hangs up is no failure of the catcher; only a port that cannot be had is.
smtp.server.on('error', giveUp('SMTP port'));
smtp.on('error', (error) => { process.stderr.write(`${error.message}\n`); });
smtp.listen(settings.MAIL_SMTP_PORT, '127.0.0.1');
const page = createMailPage(kept).listen(settings.MAIL_PAGE_PORT, '127.0.0.1');
page.on('error', giveUp('page'));

process.on('SIGTERM', () => {
  smtp.close(() => undefined);
  page.close(() => process.exit(0));
  page.closeAllConnections();
});
