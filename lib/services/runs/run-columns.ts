import { getTableColumns } from 'drizzle-orm';
import { runs } from '@/db/schema/runs';

const { program: _program, ...columns } = getTableColumns(runs);

/** All of a run but its program, which may be megabytes and is read only to send it. */
export const runColumns = columns;

/** A run's row without its program. */
export type RunRow = Omit<typeof runs.$inferSelect, 'program'>;
