import type { Request, Response, Router } from 'express';
import type { z } from 'zod';
import { ENDPOINTS, type EndpointName } from '#shared/api/endpoints';
import { writeRefusal } from '../access/audit.js';
import type { Rule } from '../access/rules.js';
import { asRefusal, signInFirst } from './problems.js';
import type { Caller, Services } from './services.js';

type Definition<N extends EndpointName> = (typeof ENDPOINTS)[N];
type Parsed<N extends EndpointName, K extends 'query' | 'body'> = Definition<N> extends Record<K, infer S> ? (S extends z.ZodType ? z.infer<S> : undefined) : undefined;
export type ReplyOf<N extends EndpointName> = Definition<N> extends { reply: infer S } ? (S extends z.ZodType ? z.input<S> : never) : never;

/** What a handler gets: who asks, what for, and what the access rule found. */
export interface Asked<N extends EndpointName, C> {
  readonly services: Services;
  readonly caller: Caller;
  readonly params: Readonly<Record<string, string>>;
  readonly query: Parsed<N, 'query'>;
  readonly body: Parsed<N, 'body'>;
  /** What the rule established: the membership, the issue, the file. */
  readonly granted: C;
  /** Work outside the database that must wait until the transaction has been committed. */
  afterwards(work: () => Promise<void>): void;
}

export interface Mounted {
  readonly name: EndpointName;
  mount(router: Router, services: Services): void;
}

/**
 * An endpoint of the table: parse, authorise, call, reply. The rule is part of the signature, so
 * an endpoint without one does not compile. Rule and handler run in one short transaction that
 * acts for the caller.
 */
export function endpoint<N extends EndpointName, C>(name: N, rule: Rule<C>, handle: (asked: Asked<N, C>) => Promise<Answer<N>>): Mounted {
  return mounted(name, async ({ services, caller, params, ...given }) => {
    const later: (() => Promise<void>)[] = [];
    const reply = await services.database.asPerson(caller.personId, async () => {
      const granted = await rule({ services, caller, params });
      return handle({ services, caller, params, granted, ...given, afterwards: (work) => later.push(work) });
    });
    for (const work of later) await work().catch((error: unknown) => services.log.warn({ error }, 'what a request leaves to do could not be done'));
    return reply;
  });
}

/**
 * An endpoint for any signed-in person that asks the database one question by itself
 * (`Database.askAs`): as that person, and within the policies like all others.
 */
export function question<N extends EndpointName>(name: N, handle: (asked: Question<N>) => Promise<Answer<N>>): Mounted {
  return mounted(name, handle);
}

type Question<N extends EndpointName> = Omit<Asked<N, never>, 'granted' | 'afterwards'>;
type Answer<N extends EndpointName> = undefined extends ReplyOf<N> ? void : ReplyOf<N>;

/** Parse, call, reply; what is refused is written down. */
function mounted<N extends EndpointName>(name: N, handle: (asked: Question<N>) => Promise<Answer<N>>): Mounted {
  const definition = ENDPOINTS[name];
  const schema = <K extends string>(key: K) => (definition as unknown as Record<K, z.ZodType | undefined>)[key];

  const answer = async (services: Services, request: Request, response: Response) => {
    const caller = callerOf(request);
    const query = schema('query')?.parse(request.query) as Parsed<N, 'query'>;
    const body = schema('body')?.parse(request.body ?? {}) as Parsed<N, 'body'>;
    const params = request.params as Record<string, string>;
    try {
      const reply = await handle({ services, caller, params, query, body });
      if (reply === undefined) response.status(204).end();
      else response.json(definition.reply.parse(reply));
    } catch (error) {
      await recordRefusal(services, request, { name, error, programme: params['programme'] });
      throw error;
    }
  };
  return {
    name,
    mount(router, services) {
      const method = definition.method.toLowerCase() as 'get' | 'post' | 'patch' | 'put' | 'delete';
      router[method](definition.path, (request, response) => answer(services, request, response));
    },
  };
}

/** What was refused stands in the audit record, in a transaction of its own: the request's has been rolled back. */
export async function recordRefusal(services: Services, request: Request, { name, error, programme }: { name: string; error: unknown; programme?: string | undefined }): Promise<void> {
  const refusal = asRefusal(error);
  if (refusal && (refusal.status === 403 || refusal.status === 404)) await writeRefusal(services, callerOf(request), { action: name, path: request.path, status: refusal.status, programme });
}

/** The caller that the session middleware found; without one the answer is 401 whatever the path. */
export function callerOf(request: Request): Caller {
  const { caller } = request as Request & { caller?: Caller };
  if (!caller) throw signInFirst();
  return caller;
}

export function setCaller(request: Request, caller: Caller): void {
  (request as Request & { caller?: Caller }).caller = caller;
}
