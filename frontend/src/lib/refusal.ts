import { problem, type Problem } from '#shared/api/common';

/** A call that the server refused, or that never reached it (`status` 0). */
export class Refusal extends Error {
  constructor(readonly problem: Problem) {
    super(problem.detail ?? problem.title);
    this.name = 'Refusal';
  }
  get status(): number { return this.problem.status; }
  /** The message for one named field, where the server names it. */
  field(name: string): string | undefined {
    return this.problem.errors?.find((e) => e.field === name || e.field.startsWith(`${name}.`))?.message;
  }
}

export const noConnection = (): Refusal =>
  new Refusal({ type: 'about:blank', title: 'The server cannot be reached', status: 0, code: 'no-connection',
    detail: 'The server cannot be reached. Check the connection; nothing you typed is lost.' });

/** Reads a problem-details body; another body still gives a plain message. */
export function refusalFrom(status: number, body: unknown): Refusal {
  const read = problem.safeParse(body);
  if (read.success) return new Refusal(read.data);
  return new Refusal({ type: 'about:blank', title: `The server answered ${status}`, status, code: 'unreadable-answer' });
}

export const statusOf = (error: unknown): number | null => (error instanceof Refusal ? error.status : null);

export const messageOf = (error: unknown): string =>
  error instanceof Error ? error.message : 'Something failed that gave no reason.';
