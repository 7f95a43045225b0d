import { FirstTables1796130828939 } from './1796130828939-first-tables';

/** In order; a new migration is added at the end. */
export const migrations = [FirstTables1796130828939];
