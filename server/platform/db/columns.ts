import { char, datetime } from 'drizzle-orm/mysql-core';

/** A record's identifier: 20 lower-case letters and digits. */
export const recordIdColumn = (name: string) => char(name, { length: 20 });

/** A moment in UTC with milliseconds. Without `fsp` MariaDB cuts the fraction off. */
export const momentColumn = (name: string) => datetime(name, { fsp: 3, mode: 'date' });
