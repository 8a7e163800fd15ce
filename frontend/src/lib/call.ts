import { z } from 'zod';
import { ENDPOINTS, type EndpointName } from '#shared/api/endpoints';
import { noConnection, Refusal, refusalFrom } from './refusal.js';

type Endpoint<N extends EndpointName> = (typeof ENDPOINTS)[N];
type ParamNames<P extends string> = P extends `${string}/:${infer Rest}`
  ? Rest extends `${infer Name}/${infer Tail}` ? Name | ParamNames<`/${Tail}`> : Rest
  : never;
type Given<N extends EndpointName, K extends string> = Endpoint<N> extends Record<K, infer S extends z.ZodType> ? z.input<S> : never;

export type Params<N extends EndpointName> = Record<ParamNames<Endpoint<N>['path']>, string>;
export type Reply<N extends EndpointName> = z.output<Endpoint<N>['reply']>;
export type Input<N extends EndpointName> =
  ([ParamNames<Endpoint<N>['path']>] extends [never] ? { params?: never } : { params: Params<N> })
  & ([Given<N, 'query'>] extends [never] ? { query?: never } : { query: Given<N, 'query'> })
  & ([Given<N, 'body'>] extends [never] ? { body?: never } : { body: Given<N, 'body'> });

/** `/api/issues/:programme/:number` with its parameters put in; each is one escaped segment. */
export const pathOf = (path: string, params: Record<string, string> = {}): string =>
  path.replace(/:([A-Za-z]+)/g, (_, name: string) => encodeURIComponent(params[name] ?? ''));

/** Lists travel as one comma-separated value; what is absent is left out. */
export function searchOf(query: Record<string, unknown> = {}): string {
  const search = new URLSearchParams();
  for (const [name, value] of Object.entries(query)) {
    if (value === undefined || value === null || value === '') continue;
    const text = Array.isArray(value) ? value.join(',') : String(value);
    if (text) search.set(name, text);
  }
  const text = search.toString();
  return text ? `?${text}` : '';
}

async function bodyOf(response: Response): Promise<unknown> {
  if (response.status === 204) return undefined;
  const text = await response.text();
  if (!text) return undefined;
  try { return JSON.parse(text); } catch { return undefined; }
}

/** Sends one request to our own server. The header is what a form on a foreign page cannot send. */
export async function send(method: string, url: string, body?: unknown, signal?: AbortSignal): Promise<unknown> {
  const headers: Record<string, string> = { accept: 'application/json', 'x-crosstie': '1' };
  if (body !== undefined) headers['content-type'] = 'application/json';
  const response = await fetch(url, {
    method, headers, credentials: 'same-origin', redirect: 'error', signal: signal ?? null,
    body: body === undefined ? null : JSON.stringify(body),
  }).catch((error: unknown) => { throw signal?.aborted ? error : noConnection(); });
  const answer = await bodyOf(response);
  if (!response.ok) throw refusalFrom(response.status, answer);
  return answer;
}

/**
 * Calls one endpoint of the shared table and reads its reply by the shared schema, so that a
 * server and a page of different builds fail at the call and not somewhere in a component.
 * Throws `Refusal`.
 */
export async function call<N extends EndpointName>(name: N, input: Input<N>, signal?: AbortSignal): Promise<Reply<N>> {
  const endpoint: { method: string; path: string; reply: z.ZodType } = ENDPOINTS[name];
  const url = pathOf(endpoint.path, input.params as Record<string, string> | undefined)
    + searchOf(input.query as Record<string, unknown> | undefined);
  const answer = await send(endpoint.method, url, input.body, signal);
  const read = endpoint.reply.safeParse(answer);
  if (read.success) return read.data as Reply<N>;
  throw new Refusal({ type: 'about:blank', status: 0, code: 'unexpected-reply', title: 'The server and this page do not match',
    detail: `The reply to ${name} is not what this page expects (${z.prettifyError(read.error).slice(0, 300)}). Reload the page.` });
}
