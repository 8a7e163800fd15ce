import { escapeHtml, plainPage } from '#shared/plain-page';
import type { KeptMessage } from './kept-mail.js';

function when(message: KeptMessage): string {
  return `<span class="fig">${escapeHtml(message.receivedAt.slice(0, 19).replace('T', ' '))} UTC</span>`;
}

function row(message: KeptMessage): string {
  const subject = `<a href="/messages/${message.id}">${escapeHtml(message.subject || 'without a subject')}</a>`;
  return `<tr><td>${when(message)}</td><td class="wide">${escapeHtml(message.to)}</td><td>${subject}</td></tr>`;
}

export function listPage(messages: readonly KeptMessage[]): string {
  const table = `<table><thead><tr><th>Sent</th><th class="wide">To</th><th>Subject</th></tr></thead><tbody>${messages.map(row).join('')}</tbody></table>`;
  const body = `<h1>Mail</h1><p class="soft">What Crosstie sent on this machine. Nothing of it left the machine; the newest stands first.</p>
${messages.length > 0 ? table : '<p>No message yet.</p>'}`;
  return plainPage({ title: 'Mail', body });
}

/** Addresses of the text become links; everything else stays text. */
function linked(text: string): string {
  return escapeHtml(text).replace(/https?:\/\/[^\s<>"')]+/g, (address) => `<a href="${address}" rel="noreferrer">${address}</a>`);
}

export function messagePage(message: KeptMessage): string {
  const body = `<p><a href="/">All mail</a></p><h1>${escapeHtml(message.subject || 'Without a subject')}</h1>
<p class="soft">To ${escapeHtml(message.to)}, from ${escapeHtml(message.from)}, ${when(message)}</p><pre>${linked(message.text)}</pre>`;
  return plainPage({ title: message.subject || 'Mail', body });
}

export function missingPage(): string {
  return plainPage({ title: 'Mail', body: '<h1>Not kept</h1><p>This message is not kept (any more). <a href="/">All mail</a></p>' });
}
