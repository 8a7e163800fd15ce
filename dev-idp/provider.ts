import { Provider, type Configuration, type KoaContextWithOIDC } from 'oidc-provider';
import { accountBySub, type Account } from './accounts.js';
import { adapterFor, FileStore } from './file-store.js';
import { providerKeys } from './keys.js';
import type { ProviderSettings } from './settings.js';
import { errorPage, signedOutPage, signOutPage } from './views.js';

const SCOPES = 'openid email profile';
const HOUR_S = 3600;

function claimsOf(account: Account) {
  return { sub: account.sub, email: account.email, email_verified: account.emailVerified, name: account.name };
}

/** Crosstie is the only client and belongs to the same house, so nobody is asked for consent. */
async function grantFor(ctx: KoaContextWithOIDC) {
  const { client, session, provider } = ctx.oidc;
  if (!client || !session?.accountId) return undefined;
  const known = session.grantIdFor(client.clientId);
  const found = known ? await provider.Grant.find(known) : undefined;
  if (found) return found;
  const grant = new provider.Grant({ clientId: client.clientId, accountId: session.accountId });
  grant.addOIDCScope(SCOPES);
  await grant.save();
  return grant;
}

/** A sign-out that carries the signed-in person's own token needs no further question. */
function isOwnSignOut(ctx: KoaContextWithOIDC): boolean {
  const hint = ctx.oidc.entities.IdTokenHint as { payload?: { sub?: string } } | undefined;
  return hint?.payload?.sub !== undefined && hint.payload.sub === ctx.oidc.session?.accountId;
}

function signOut(settings: ProviderSettings) {
  return {
    enabled: true,
    logoutSource: (ctx: KoaContextWithOIDC, form: string) => {
      ctx.set('content-security-policy', pagePolicy(settings.publicUrl));
      ctx.body = signOutPage(form, isOwnSignOut(ctx));
    },
    postLogoutSuccessSource: (ctx: KoaContextWithOIDC) => { ctx.body = signedOutPage(); },
  };
}

/** Nothing from elsewhere; forms may end at Crosstie, to which the provider's replies lead. */
export function pagePolicy(publicUrl: string): string {
  const own = "default-src 'none'; style-src 'self'; font-src 'self'; script-src 'self'; base-uri 'none'; frame-ancestors 'none'";
  return `${own}; form-action 'self' ${new URL(publicUrl).origin}`;
}

function configuration(settings: ProviderSettings): Configuration {
  const { jwks, cookieKeys } = providerKeys(settings.storeDir);
  const cookie = (name: string) => `crosstie_idp_${settings.port}_${name}`;
  return {
    adapter: adapterFor(new FileStore(settings.storeDir)),
    jwks,
    clients: [{
      client_id: settings.client.id,
      client_secret: settings.client.secret,
      redirect_uris: [`${settings.publicUrl}/api/auth/callback`],
      post_logout_redirect_uris: [`${settings.publicUrl}/`],
      token_endpoint_auth_method: 'client_secret_basic',
    }],
    cookies: { keys: cookieKeys, names: { session: cookie('session'), interaction: cookie('interaction'), resume: cookie('resume') } },
    claims: { openid: ['sub'], email: ['email', 'email_verified'], profile: ['name'] },
    conformIdTokenClaims: false,
    pkce: { required: () => true },
    features: { devInteractions: { enabled: false }, rpInitiatedLogout: signOut(settings) },
    interactions: { url: (_ctx, interaction) => `/interaction/${interaction.uid}` },
    findAccount: (_ctx, sub) => {
      const account = accountBySub(sub);
      return account && { accountId: account.sub, claims: () => claimsOf(account) };
    },
    loadExistingGrant: grantFor,
    renderError: (ctx, out) => {
      ctx.type = 'html';
      ctx.body = errorPage(out.error_description ?? out.error, settings.publicUrl);
    },
    ttl: { Session: 12 * HOUR_S, Grant: 12 * HOUR_S, Interaction: HOUR_S, AccessToken: HOUR_S, IdToken: HOUR_S },
  };
}

export function createProvider(settings: ProviderSettings): Provider {
  return new Provider(settings.issuer, configuration(settings));
}
