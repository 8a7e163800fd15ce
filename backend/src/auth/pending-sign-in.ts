import { createCipheriv, createDecipheriv, hkdfSync, randomBytes } from 'node:crypto';
import { z } from 'zod';

/** What must survive the way to the identity provider and back. */
const pendingSignIn = z.object({
  state: z.string(),
  nonce: z.string(),
  verifier: z.string(),
  returnTo: z.string(),
  invitation: z.string().nullable(),
  expiresAt: z.number(),
});
export type PendingSignIn = z.infer<typeof pendingSignIn>;

export const PENDING_MS = 10 * 60_000;
const IV_BYTES = 12;
const TAG_BYTES = 16;

/** Seals a sign-in under way into a cookie that its holder can neither read nor change (AES-256-GCM). */
export class PendingSeal {
  readonly #key: Buffer;

  constructor(secret: string) {
    this.#key = Buffer.from(hkdfSync('sha256', secret, '', 'crosstie pending sign-in', 32));
  }

  seal(pending: PendingSignIn): string {
    const iv = randomBytes(IV_BYTES);
    const cipher = createCipheriv('aes-256-gcm', this.#key, iv);
    const body = Buffer.concat([cipher.update(JSON.stringify(pending), 'utf8'), cipher.final()]);
    return Buffer.concat([iv, cipher.getAuthTag(), body]).toString('base64url');
  }

  /** Null for what was not sealed here, or has expired. */
  open(sealed: string, now: number = Date.now()): PendingSignIn | null {
    try {
      const bytes = Buffer.from(sealed, 'base64url');
      const decipher = createDecipheriv('aes-256-gcm', this.#key, bytes.subarray(0, IV_BYTES));
      decipher.setAuthTag(bytes.subarray(IV_BYTES, IV_BYTES + TAG_BYTES));
      const text = Buffer.concat([decipher.update(bytes.subarray(IV_BYTES + TAG_BYTES)), decipher.final()]).toString('utf8');
      const pending = pendingSignIn.parse(JSON.parse(text));
      return pending.expiresAt > now ? pending : null;
    } catch {
      return null;
    }
  }
}
