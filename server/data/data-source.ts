import 'reflect-metadata';
import { DataSource } from 'typeorm';
import { ENTITIES } from './entities/list.ts';
import { MIGRATIONS } from './migrations/list.ts';

export interface DataSourceSetup {
  url: string;
  connections: number;
}

/** The TypeORM data source, not yet connected. Schema changes come from migrations only; dates are UTC. */
export function createDataSource({ url, connections }: DataSourceSetup): DataSource {
  return new DataSource({
    type: 'mariadb',
    url,
    poolSize: connections,
    charset: 'utf8mb4_unicode_ci',
    timezone: 'Z',
    connectTimeout: 10_000,
    supportBigNumbers: true,
    bigNumberStrings: true,
    entities: ENTITIES,
    migrations: MIGRATIONS,
    migrationsTableName: 'schema_migration',
    migrationsTransactionMode: 'each',
    synchronize: false,
    logging: false,
  });
}
