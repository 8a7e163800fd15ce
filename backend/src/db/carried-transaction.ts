import { AsyncLocalStorage } from 'node:async_hooks';
import { Sequelize } from 'sequelize';

/**
 * Sequelize's CLS hook over Node's own AsyncLocalStorage: a transaction opened for a person is
 * carried to every query made inside it, so that no query can forget whom it acts for.
 */
const storage = new AsyncLocalStorage<Map<string, unknown>>();

const namespace = {
  run<T>(work: (context: Map<string, unknown>) => T): T {
    const context = new Map(storage.getStore());
    return storage.run(context, () => work(context));
  },
  bind<T extends (...args: never[]) => unknown>(work: T, context?: Map<string, unknown>): T {
    const carried = context ?? storage.getStore() ?? new Map<string, unknown>();
    return ((...args: never[]) => storage.run(carried, () => work(...args))) as T;
  },
  get: (key: string) => storage.getStore()?.get(key),
  set: (key: string, value: unknown) => storage.getStore()?.set(key, value),
};

export function carryTransactions(): void {
  Sequelize.useCLS(namespace);
}

export function carriedTransaction(): unknown {
  return storage.getStore()?.get('transaction');
}
