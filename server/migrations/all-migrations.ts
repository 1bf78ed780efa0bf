import { FirstTables1764547200000 } from './1764547200000-first-tables';

/** In the order they are run. */
export const ALL_MIGRATIONS = [FirstTables1764547200000];
