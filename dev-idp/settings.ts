import { z } from 'zod';
import { isLoopback } from '#shared/loopback';

const environment = z.object({
  IDP_PORT: z.coerce.number().int().min(1).max(65_535),
  PUBLIC_URL: z.url(),
  OIDC_CLIENT_ID: z.string().min(1),
  OIDC_CLIENT_SECRET: z.string().min(16),
  IDP_STORE_DIR: z.string().min(1),
  IDP_PASSWORD: z.string().min(8).optional(),
});

export interface ProviderSettings {
  port: number;
  issuer: string;
  /** Where Crosstie is reached, no trailing slash. */
  publicUrl: string;
  client: { id: string; secret: string };
  /** Folder for its keys and sessions, so that a restart signs nobody out. */
  storeDir: string;
  password: string | undefined;
}

/** Throws where the provider would serve anything but this machine: its accounts share one known password. */
export function readSettings(env: NodeJS.ProcessEnv = process.env): ProviderSettings {
  const parsed = environment.safeParse(env);
  if (!parsed.success) throw new Error(`The demo's identity provider cannot start: ${parsed.error.issues.map((issue) => `${issue.path.join('.')}: ${issue.message}`).join('; ')}`);
  const values = parsed.data;
  if (!isLoopback(values.PUBLIC_URL)) {
    throw new Error(`The demo's identity provider serves only this machine, and PUBLIC_URL is ${values.PUBLIC_URL}. Set OIDC_ISSUER to your own provider.`);
  }
  return {
    port: values.IDP_PORT,
    issuer: `http://127.0.0.1:${values.IDP_PORT}`,
    publicUrl: values.PUBLIC_URL.replace(/\/+$/, ''),
    client: { id: values.OIDC_CLIENT_ID, secret: values.OIDC_CLIENT_SECRET },
    storeDir: values.IDP_STORE_DIR,
    password: values.IDP_PASSWORD,
  };
}
