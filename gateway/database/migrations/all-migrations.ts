import { FirstTables1764547200000 } from './0001-first-tables.js';
import { ShelvesTakenAway1764633600000 } from './0002-shelves-taken-away.js';

export const ALL_MIGRATIONS = [FirstTables1764547200000, ShelvesTakenAway1764633600000];
