import { randomBytes } from 'node:crypto';
import { createReadStream, createWriteStream } from 'node:fs';
import { mkdir, readdir, rename, rm } from 'node:fs/promises';
import { join } from 'node:path';
import { Transform, type Readable } from 'node:stream';
import { pipeline } from 'node:stream/promises';
import { simpleParser, type AddressObject, type ParsedMail } from 'mailparser';

export interface KeptMessage {
  id: string;
  receivedAt: string;
  messageId: string;
  from: string;
  to: string;
  subject: string;
  text: string;
}

const NAME = /^\d{13}-[0-9a-f]{8}$/;
const ENDING = '.eml';

/** The last messages that were sent in development, each as a file. */
export class KeptMail {
  readonly #folder: string;
  readonly #most: number;

  constructor(folder: string, most = 200) {
    this.#folder = folder;
    this.#most = most;
  }

  /** Keeps one message and forgets the oldest beyond the limit. Rejects above `limitBytes`, leaving nothing. */
  async keep(message: Readable, limitBytes: number): Promise<void> {
    await mkdir(this.#folder, { recursive: true, mode: 0o700 });
    const id = `${String(Date.now()).padStart(13, '0')}-${randomBytes(4).toString('hex')}`;
    const arriving = join(this.#folder, `${id}.part`);
    try {
      await pipeline(message, limit(limitBytes), createWriteStream(arriving, { mode: 0o600 }));
      await rename(arriving, this.#path(id));
    } catch (error) {
      await rm(arriving, { force: true });
      throw error;
    }
    for (const old of (await this.ids()).slice(this.#most)) await rm(this.#path(old), { force: true });
  }

  /** Newest first. */
  async ids(): Promise<string[]> {
    const names = await readdir(this.#folder).catch(() => [] as string[]);
    const ids = names.filter((name) => name.endsWith(ENDING)).map((name) => name.slice(0, -ENDING.length));
    return ids.filter((id) => NAME.test(id)).sort().reverse();
  }

  /** Null for what is not kept (any more). */
  async read(id: string): Promise<KeptMessage | null> {
    if (!NAME.test(id)) return null;
    try {
      return described(id, await simpleParser(createReadStream(this.#path(id)), { skipHtmlToText: false }));
    } catch {
      return null;
    }
  }

  async all(): Promise<KeptMessage[]> {
    const read = await Promise.all((await this.ids()).map((id) => this.read(id)));
    return read.filter((message) => message !== null);
  }

  #path(id: string): string {
    return join(this.#folder, `${id}${ENDING}`);
  }
}

function limit(bytes: number): Transform {
  let seen = 0;
  return new Transform({
    transform(chunk: Buffer, _encoding, done) {
      seen += chunk.length;
      done(seen > bytes ? new Error('the message is too large') : null, chunk);
    },
  });
}

function addresses(value: AddressObject | AddressObject[] | undefined): string {
  return [value ?? []].flat().map((one) => one.text).join(', ');
}

function described(id: string, mail: ParsedMail): KeptMessage {
  return {
    id,
    receivedAt: new Date(Number(id.slice(0, 13))).toISOString(),
    messageId: mail.messageId ?? '',
    from: addresses(mail.from),
    to: addresses(mail.to),
    subject: mail.subject ?? '',
    text: mail.text ?? '',
  };
}
