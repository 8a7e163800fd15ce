/** Each connection keeps a prepared statement for good, so that few questions may have one. */
const MOST = 100;

/** Gives a name to the first questions that ask for one; the others are planned each time. */
export class StatementNames {
  readonly #names = new Map<string, string>();

  nameOf(sql: string): { name?: string } {
    const known = this.#names.get(sql);
    if (known) return { name: known };
    if (this.#names.size >= MOST) return {};
    const name = `crosstie_${this.#names.size}`;
    this.#names.set(sql, name);
    return { name };
  }
}
