import * as oidc from 'openid-client';
import { isLoopback } from '#shared/loopback';
import type { Config } from '../config.js';
import type { PendingSignIn } from './pending-sign-in.js';

/** A person as the identity provider vouches for them. */
export interface ProviderPerson {
  issuer: string;
  subject: string;
  email: string;
  emailVerified: boolean;
  name: string;
  /** The provider's own token, to end its session with. */
  idToken: string;
}

/** The client of the identity provider; discovers it at first use, and again after a failure. */
export class ProviderClient {
  readonly #config: Config;
  #discovered: Promise<oidc.Configuration> | undefined;

  constructor(config: Config) {
    this.#config = config;
  }

  /** Where the browser goes to sign in, with PKCE, state and nonce. `again`: ask even whoever is signed in there. */
  async signInUrl(pending: PendingSignIn, again: boolean): Promise<string> {
    const url = oidc.buildAuthorizationUrl(await this.#discover(), {
      redirect_uri: this.#redirectUri,
      scope: 'openid email profile',
      code_challenge: await oidc.calculatePKCECodeChallenge(pending.verifier),
      code_challenge_method: 'S256',
      state: pending.state,
      nonce: pending.nonce,
      ...(again ? { prompt: 'login' } : {}),
    });
    return url.href;
  }

  /** Redeems the code of a callback. Throws when anything about the reply is not as it was asked for. */
  async redeem(query: string, pending: PendingSignIn): Promise<ProviderPerson> {
    const configuration = await this.#discover();
    const tokens = await oidc.authorizationCodeGrant(configuration, new URL(`${this.#redirectUri}${query}`), {
      pkceCodeVerifier: pending.verifier, expectedState: pending.state, expectedNonce: pending.nonce, idTokenExpected: true,
    });
    const claims = tokens.claims();
    if (!claims || !tokens.id_token) throw new Error('the identity provider sent no ID token');
    // Providers may keep the e-mail claim for the user-info endpoint (OpenID Connect Core 5.4).
    const more = claims['email'] === undefined ? await oidc.fetchUserInfo(configuration, tokens.access_token, claims.sub) : {};
    return person({ ...more, ...claims }, tokens.id_token);
  }

  /** Where the browser ends the provider's session; null when the provider has no such place. */
  async signOutUrl(idToken: string | undefined): Promise<string | null> {
    const configuration = await this.#discover();
    if (!configuration.serverMetadata().end_session_endpoint) return null;
    const parameters = { post_logout_redirect_uri: `${this.#config.publicUrl}/`, ...(idToken ? { id_token_hint: idToken } : {}) };
    return oidc.buildEndSessionUrl(configuration, parameters).href;
  }

  get #redirectUri(): string {
    return `${this.#config.publicUrl}/api/auth/callback`;
  }

  #discover(): Promise<oidc.Configuration> {
    this.#discovered ??= discover(this.#config).catch((error: unknown) => {
      this.#discovered = undefined;
      throw error;
    });
    return this.#discovered;
  }
}

function person(claims: Record<string, unknown> & { sub: string; iss: string }, idToken: string): ProviderPerson {
  const text = (name: string) => (typeof claims[name] === 'string' ? (claims[name] as string).trim() : '');
  const email = text('email');
  const name = text('name') || text('preferred_username') || email || claims.sub;
  return { issuer: claims.iss, subject: claims.sub, email, emailVerified: claims['email_verified'] === true, name: name.slice(0, 200), idToken };
}

/** Plain http is allowed to this machine alone. */
async function discover({ oidc: { issuer, clientId, clientSecret } }: Config): Promise<oidc.Configuration> {
  const options = isLoopback(issuer) ? { execute: [oidc.allowInsecureRequests], timeout: 10 } : { timeout: 10 };
  const authentication = clientSecret ? oidc.ClientSecretBasic(clientSecret) : oidc.None();
  return oidc.discovery(new URL(issuer), clientId, {}, authentication, options);
}
