import { escapeHtml, plainPage } from '#shared/plain-page';
import { ACCOUNTS, type Account } from './accounts.js';

interface SignInView { uid: string; email?: string; refused?: boolean }

/** The sign-in page: an e-mail address and the password that npm start printed. */
export function signInPage({ uid, email = '', refused = false }: SignInView): string {
  const body = `<h1>Sign in</h1>
<p class="soft">The demo's identity provider, on this machine only. The password of every account was printed by npm start.</p>
${refused ? '<p class="refused" role="alert">No account has this e-mail address and password. Nothing was signed in.</p>' : ''}
<form method="post" action="/interaction/${escapeHtml(uid)}">
<label for="email">E-mail address</label>
<input id="email" name="email" type="email" autocomplete="username" required value="${escapeHtml(email)}"${email ? '' : ' autofocus'}>
<label for="password">Password</label>
<input id="password" name="password" type="password" autocomplete="current-password" required${email ? ' autofocus' : ''}>
<button>Sign in</button>
</form>
<h2>Demo accounts</h2>
<form method="get" action="/interaction/${escapeHtml(uid)}">
<table><thead><tr><th>Person</th><th>Party</th><th class="wide">Work</th></tr></thead><tbody>${ACCOUNTS.map(accountRow).join('')}</tbody></table>
</form>`;
  return plainPage({ title: 'Sign in', body });
}

function accountRow(account: Account): string {
  const button = `<button name="email" value="${escapeHtml(account.email)}">${escapeHtml(account.name)}</button>`;
  return `<tr><td>${button}</td><td>${escapeHtml(account.party)}</td><td class="wide soft">${escapeHtml(account.work)}</td></tr>`;
}

/** `form` is the provider's own, with its token. `sure`: the request proved who it is, so it needs no question. */
export function signOutPage(form: string, sure: boolean): string {
  const body = `<h1>Sign out</h1><p>Sign out of the demo's identity provider too? Otherwise the next sign-in asks for no password.</p>${form}
<button form="op.logoutForm" name="logout" value="yes" id="sign-out">Sign out</button>
<button class="plain" form="op.logoutForm">Stay signed in</button>`;
  return plainPage({ title: 'Sign out', body, script: sure ? '/look/sign-out.js' : undefined });
}

/** Presses the one button where the request needs no question. */
export const signOutScript = "document.getElementById('sign-out').click();\n";

export function signedOutPage(): string {
  return plainPage({ title: 'Signed out', body: '<h1>Signed out</h1><p>You may close this page.</p>' });
}

export function errorPage(detail: string, publicUrl: string): string {
  const body = `<h1>This sign-in cannot go on</h1><p>${escapeHtml(detail)}</p><p><a href="${escapeHtml(publicUrl)}">Back to Crosstie</a></p>`;
  return plainPage({ title: 'Sign in', body });
}
