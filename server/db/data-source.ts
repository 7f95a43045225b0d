import { readConfig } from '../config';
import { createWriter } from './database';

/** For TypeORM's command line: `migration:generate`, `migration:show`. */
export default createWriter(readConfig(process.env).databaseFile);
