import type { Db } from './client.js';

/**
 * Runs work in one transaction: everything it writes is kept together or not at all.
 * Inside another transaction it becomes a savepoint of that one.
 */
export function inTransaction<T>(db: Db, work: (tx: Db) => Promise<T>): Promise<T> {
  return db.transaction((tx) => work(tx));
}

/** The same for services, which know repositories and no database. */
export type Transact<Repositories> = <T>(work: (repos: Repositories) => Promise<T>) => Promise<T>;
