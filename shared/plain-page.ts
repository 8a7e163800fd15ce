/** Pages that a server writes whole, in the product's look: sign-in of the demo's provider, the caught mail. */

const entities: Record<string, string> = { '&': '&amp;', '<': '&lt;', '>': '&gt;', '"': '&quot;', "'": '&#39;' };

export function escapeHtml(text: string): string {
  return text.replace(/[&<>"']/g, (character) => entities[character]);
}

/** Two rails, two ties that hold, one that stops short. */
const mark = `<svg width="26" height="26" viewBox="0 0 26 26" aria-hidden="true"><path class="a" d="M4 1h4v24H4z"/>
<path class="b" d="M18 1v24M22 1v24"/><path class="tie" d="M8 6h10M8 20h10M8 13h5.5"/><path class="short" d="M17.6 14.6l-3.4-.9"/></svg>`;

/** `title` is escaped here; `body` is HTML. `script` is the address of a script of the same origin. */
export function plainPage({ title, body, script }: { title: string; body: string; script?: string }): string {
  return `<!doctype html>
<html lang="en"><head><meta charset="utf-8"><meta name="viewport" content="width=device-width,initial-scale=1">
<title>${escapeHtml(title)} · Crosstie</title><link rel="stylesheet" href="/look/page.css">${script ? `<script defer src="${script}"></script>` : ''}</head>
<body><header>${mark}<span>Crosstie</span></header><main>${body}</main></body></html>`;
}

/** Served as /look/page.css; the faces it names are served under /look/. */
export const plainPageStyle = `
:root { color-scheme: light dark; --ground: #f5f2eb; --sheet: #fcfaf6; --rule: #d9d3c6; --edge: #81776a; --ink: #1d1b17;
  --soft: #4e483e; --rail-a: #0b5553; --rail-b: #652a5a; --broken: #b32b12; --broken-ink: #96220d; }
@media (prefers-color-scheme: dark) {
  :root { --ground: #151310; --sheet: #1d1a16; --rule: #37322a; --edge: #857a68; --ink: #f2eee5;
    --soft: #c3bbac; --rail-a: #6fc7c1; --rail-b: #d7a0cc; --broken: #ff8a6b; --broken-ink: #ff8a6b; }
}
@font-face { font-family: Archivo; src: url(/look/archivo-latin-standard-normal.woff2); font-weight: 100 900; font-stretch: 62% 125%; }
@font-face { font-family: "Commit Mono"; src: url(/look/commit-mono-latin-400-normal.woff2); }
* { box-sizing: border-box; }
body { margin: 0; background: var(--ground); color: var(--ink); font: 15px/1.4 Archivo, system-ui, sans-serif; }
header { display: flex; align-items: center; gap: 10px; height: 52px; padding: 0 24px; border-bottom: 1px solid var(--rule); font-weight: 650; font-stretch: 112%; }
svg { overflow: visible; } svg path { fill: none; stroke-width: 2.4; }
svg .a { fill: var(--rail-a); } svg .b { stroke: var(--rail-b); } svg .tie { stroke: var(--ink); } svg .short { stroke: var(--broken); }
main { max-width: 760px; padding: 28px 24px 60px; margin: 0 auto; }
h1 { font-size: 22px; font-weight: 600; margin: 0 0 6px; } h2 { font-size: 15px; font-weight: 600; margin: 32px 0 4px; }
p { margin: 0 0 14px; max-width: 62ch; } .soft { color: var(--soft); } .refused { color: var(--broken-ink); font-weight: 600; }
label { display: block; font-weight: 600; margin: 14px 0 4px; }
input { display: block; width: 100%; max-width: 380px; font: inherit; padding: 8px 10px; color: var(--ink); background: var(--sheet); border: 1px solid var(--edge); border-radius: 0; }
button { font: inherit; font-weight: 600; padding: 8px 18px; margin: 18px 12px 0 0; color: var(--ground); background: var(--ink); border: 1px solid var(--ink); border-radius: 0; cursor: pointer; }
button.plain { color: var(--ink); background: none; } :focus-visible { outline: 2px solid var(--ink); outline-offset: 2px; }
table { border-collapse: collapse; width: 100%; background: var(--sheet); border: 1px solid var(--rule); margin-top: 10px; }
th { text-align: left; font-size: 13px; font-weight: 600; padding: 8px 10px; border-bottom: 1px solid var(--edge); }
td { padding: 7px 10px; border-bottom: 1px solid var(--rule); font-stretch: 92%; vertical-align: baseline; }
td button { margin: 0; padding: 0; border: 0; background: none; color: var(--ink); font-weight: 600; text-align: left; text-decoration: underline; text-underline-offset: 3px; }
a { color: var(--ink); text-underline-offset: 3px; } .fig, pre { font-family: "Commit Mono", ui-monospace, monospace; font-size: 12.5px; }
pre { white-space: pre-wrap; overflow-wrap: anywhere; background: var(--sheet); border: 1px solid var(--rule); padding: 14px; }
@media (max-width: 560px) { td.wide, th.wide { display: none; } main { padding: 20px 16px; } header { padding: 0 16px; } }
`;

/** Files of fonts/ that the style names. */
export const plainPageFaces = ['archivo-latin-standard-normal.woff2', 'commit-mono-latin-400-normal.woff2'] as const;
