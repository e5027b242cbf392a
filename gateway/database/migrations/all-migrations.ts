import { FirstTables1764547200000 } from './0001-first-tables.js';

export const ALL_MIGRATIONS = [FirstTables1764547200000];
