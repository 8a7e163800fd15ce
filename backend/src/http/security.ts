import helmet from 'helmet';
import type { RequestHandler } from 'express';
import type { Config } from '../config.js';

/** Headers for every answer. The sign-out form ends at the identity provider, so its origin is a form target. */
export function securityHeaders(config: Config): RequestHandler {
  const https = config.publicUrl.startsWith('https:');
  const { origin: provider } = new URL(config.oidc.issuer);
  return helmet({
    contentSecurityPolicy: {
      useDefaults: false,
      directives: {
        defaultSrc: ["'self'"], scriptSrc: ["'self'"], styleSrc: ["'self'"], styleSrcAttr: ["'unsafe-inline'"], imgSrc: ["'self'", 'data:'], fontSrc: ["'self'"],
        connectSrc: ["'self'"], workerSrc: ["'self'"], objectSrc: ["'none'"], baseUri: ["'none'"], frameAncestors: ["'none'"], formAction: ["'self'", provider],
        ...(https ? { upgradeInsecureRequests: [] } : {}),
      },
    },
    strictTransportSecurity: https ? { maxAge: 31_536_000 } : false,
    crossOriginEmbedderPolicy: false,
    referrerPolicy: { policy: 'same-origin' },
  });
}
