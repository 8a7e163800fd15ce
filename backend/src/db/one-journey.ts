import { Socket } from 'node:net';
import pg, { type ClientConfig, type QueryConfig, type QueryResult } from 'pg';

/** The driver's client, which sends its queries without waiting for the answers to those before. */
export class PipelinedClient extends pg.Client {
  readonly #socket: Socket;

  constructor(config: ClientConfig) {
    const socket = new Socket();
    super({ ...config, pipeline: true, stream: () => socket });
    this.#socket = socket;
  }

  /** What is asked in this turn of the event loop leaves in one piece. */
  gather(): void {
    this.#socket.cork();
    process.nextTick(() => this.#socket.uncork());
  }
}

/**
 * Sends the statements together and answers when all of them have been: each waits for those before it in
 * the database and not on the way. One that fails lets those after it fail, and a commit then rolls back.
 */
export async function inOneJourney(client: PipelinedClient, statements: readonly (string | QueryConfig)[]): Promise<QueryResult[]> {
  client.gather();
  const answers = await Promise.allSettled(statements.map((statement) => client.query(statement as QueryConfig)));
  const failed = answers.find((answer) => answer.status === 'rejected');
  if (failed) throw failed.reason;
  return answers.map((answer) => (answer as PromiseFulfilledResult<QueryResult>).value);
}
