/** What the columns of all tables have in common. */
import { customType, timestamp } from 'drizzle-orm/pg-core';

export const bytes = customType<{ data: Uint8Array; driverData: Uint8Array }>({
  dataType: () => 'bytea',
});

/** A string of 512 digits 0 and 1, which the database combines with `&`. */
export const bits512 = customType<{ data: string; driverData: string }>({
  dataType: () => 'bit(512)',
});

export const moment = (name: string) => timestamp(name, { withTimezone: true, mode: 'date' });

export const created = () => moment('created_at').notNull().defaultNow();
