import { numeric, timestamp } from 'drizzle-orm/pg-core';

/** A moment, UTC, to the millisecond. */
export const moment = () => timestamp({ withTimezone: true, precision: 3, mode: 'date' });

/** A length in mm, to the micrometre. */
export const millimetres = () => numeric({ precision: 12, scale: 3, mode: 'number' });
