import 'reflect-metadata';
import { DataSource } from 'typeorm';
import { ENTITIES } from './entities.ts';
import { SnakeNaming } from './snake-naming.ts';

/**
 * The connections of a running server, as the `app` (or `jobs`) role: it makes no tables. Reads and writes of firm rows go
 * through `inFirm`; `query` and `getRepository` of the data source itself have no firm and see nothing.
 */
export function createDataSource(options: { url: string; poolSize?: number; applicationName?: string }): DataSource {
  return new DataSource({
    type: 'postgres',
    url: options.url,
    poolSize: options.poolSize ?? 10,
    applicationName: options.applicationName ?? 'tarewright',
    entities: ENTITIES,
    namingStrategy: new SnakeNaming(),
    synchronize: false,
    // gen_random_uuid() is built in: nothing is to be installed.
    installExtensions: false,
    uuidExtension: 'pgcrypto',
  });
}
