import type { Client } from 'pg';

/** Plain inserts as the schema's owner: the demo's history lies in the past, which no service would write. */
export class Rows {
  constructor(private readonly owner: Client, private readonly now: Date) {}

  /** A moment so many days from the seeding. */
  at(day: number): Date {
    return new Date(this.now.getTime() + day * 86_400_000);
  }

  date(day: number): string {
    return this.at(day).toISOString().slice(0, 10);
  }

  async insert(table: string, row: Record<string, unknown>): Promise<string> {
    const all: Record<string, unknown> = { id: crypto.randomUUID(), ...row };
    const names = Object.keys(all);
    await this.owner.query(`insert into ${table} (${names.join(', ')}) values (${names.map((_, i) => `$${i + 1}`).join(', ')})`, Object.values(all));
    return all.id as string;
  }

  async link(table: string, row: Record<string, unknown>): Promise<void> {
    const names = Object.keys(row);
    await this.owner.query(`insert into ${table} (${names.join(', ')}) values (${names.map((_, i) => `$${i + 1}`).join(', ')})`, Object.values(row));
  }

  async run(sql: string, bind: unknown[] = []): Promise<void> {
    await this.owner.query(sql, bind);
  }

  async value<T>(sql: string, bind: unknown[] = []): Promise<T> {
    const { rows } = await this.owner.query<{ value: T }>(sql, bind);
    return rows[0].value;
  }
}
