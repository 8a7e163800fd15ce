import type { AddressInfo } from 'node:net';
import { once } from 'node:events';
import { simpleParser, type ParsedMail } from 'mailparser';
import { SMTPServer } from 'smtp-server';

export interface Received {
  readonly envelopeTo: readonly string[];
  readonly raw: string;
  readonly parsed: ParsedMail;
}

/** A real SMTP server on loopback that keeps what it is sent. */
export interface MailSink {
  readonly url: string;
  readonly received: Received[];
  /** Refuse the next messages after their data, as a server that broke down would. */
  failNext(count: number): void;
  /** Stops listening; `open` again takes the same port. */
  close(): Promise<void>;
  open(): Promise<void>;
}

export async function openMailSink(): Promise<MailSink> {
  const received: Received[] = [];
  let failures = 0;
  let port = 0;
  let server: SMTPServer;
  const open = async () => {
    server = new SMTPServer({
      authOptional: true, disabledCommands: ['STARTTLS'], logger: false,
      onData(stream, session, done) {
        const parts: Buffer[] = [];
        stream.on('data', (part: Buffer) => parts.push(part));
        stream.on('end', () => {
          const raw = Buffer.concat(parts).toString();
          void simpleParser(raw).then((parsed) => {
            // Taken, and then the answer is lost: the sender cannot know, and sends again.
            received.push({ envelopeTo: session.envelope.rcptTo.map(({ address }) => address), raw, parsed });
            const fails = failures > 0;
            failures = Math.max(0, failures - 1);
            done(fails ? Object.assign(new Error('broken down'), { responseCode: 451 }) : null);
          }, done);
        });
      },
    });
    server.on('error', () => undefined);
    server.listen(port, '127.0.0.1');
    await once(server.server, 'listening');
    port = (server.server.address() as AddressInfo).port;
  };
  await open();
  return {
    url: `smtp://127.0.0.1:${port}`, received, open,
    failNext: (count) => { failures = count; },
    close: () => new Promise((resolve) => { server.close(() => resolve()); }),
  };
}
