import pg from 'pg';
import { QueryTypes, Sequelize } from 'sequelize';
import { carriedTransaction, carryTransactions } from './carried-transaction.js';
import { inOneJourney, PipelinedClient } from './one-journey.js';
import { StatementNames } from './statement-names.js';

carryTransactions();
// Counts and sizes fit a double; as text they would be compared as text.
pg.types.setTypeParser(pg.types.builtins.INT8, Number);
// A calendar day has no zone: a Date would move it.
pg.types.setTypeParser(pg.types.builtins.DATE, String);

export type Bind = readonly unknown[];

/**
 * The application's database. Everything done for a person happens inside `asPerson`: one short
 * transaction that names the person to the policies. A query outside of one sees no tenant row.
 */
export class Database {
  readonly sequelize: Sequelize;
  readonly #names = new StatementNames();

  constructor(url: string, options: { pool?: number } = {}) {
    this.sequelize = new Sequelize(url, {
      dialect: 'postgres',
      dialectModule: { ...pg, Client: PipelinedClient },
      logging: false,
      pool: { max: options.pool ?? 20, min: 0, acquire: 15_000, idle: 10_000 },
      // Compiling a query takes longer than any of these runs.
      dialectOptions: { statement_timeout: 30_000, idle_in_transaction_session_timeout: 30_000, keepAlive: true, options: '-c jit=off' },
      define: { timestamps: false, underscored: true },
    });
  }

  /** One short transaction that acts for a person; never hold it while bytes are received or sent. */
  asPerson<T>(personId: string, work: () => Promise<T>): Promise<T> {
    if (carriedTransaction()) throw new Error('a transaction for a person is open already; pass it on instead of opening another');
    return this.sequelize.transaction(async () => {
      await this.rows(naming(personId));
      return work();
    });
  }

  /**
   * One question as a person, in a transaction of its own that takes one journey to the database. For what
   * is asked so often that each journey tells; each connection plans it once.
   */
  async askAs<T extends object>(personId: string, sql: string, bind: Bind = []): Promise<T[]> {
    if (carriedTransaction()) throw new Error('a transaction for a person is open already; ask in it');
    const { connectionManager } = this.sequelize;
    const connection = await connectionManager.getConnection({ type: 'read' }) as PipelinedClient;
    try {
      const [, answer] = await inOneJourney(connection, [
        `begin read only; ${naming(personId)}`, { ...this.#names.nameOf(sql), text: sql, values: [...bind] }, 'commit',
      ]);
      return answer.rows as T[];
    } finally {
      connectionManager.releaseConnection(connection);
    }
  }

  /** The rows that a query answers, inside the carried transaction if there is one. */
  async rows<T extends object>(sql: string, bind: Bind = []): Promise<T[]> {
    return this.sequelize.query<T>(sql, { bind: [...bind], type: QueryTypes.SELECT });
  }

  async row<T extends object>(sql: string, bind: Bind = []): Promise<T | null> {
    const rows = await this.rows<T>(sql, bind);
    return rows[0] ?? null;
  }

  /** How many rows a change touched. */
  async change(sql: string, bind: Bind = []): Promise<number> {
    const [, result] = await this.sequelize.query(sql, { bind: [...bind] });
    return (result as { rowCount?: number | null }).rowCount ?? 0;
  }

  /** The plain shape that sign-in needs: no person acts yet. */
  readonly query = async (sql: string, params: readonly unknown[] = []): Promise<{ rows: Record<string, unknown>[] }> =>
    ({ rows: await this.rows(sql, params) });

  close(): Promise<void> {
    return this.sequelize.close();
  }
}

const UUID = /^[0-9a-f]{8}-[0-9a-f]{4}-[0-9a-f]{4}-[0-9a-f]{4}-[0-9a-f]{12}$/i;

/** The statement that names a person to the policies until the transaction ends. */
function naming(personId: string): string {
  if (!UUID.test(personId)) throw new Error('not a person\'s identifier');
  return `select set_config('crosstie.person', '${personId}', true)`;
}
