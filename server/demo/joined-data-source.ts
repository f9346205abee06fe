import type { DataSource, QueryRunner } from 'typeorm';

const nothing = async (): Promise<void> => undefined;

/**
 * The data source as services see it while a firm is loaded: everything they do runs in the one transaction that is open
 * on the runner, whoever they do it for, and is committed or rolled back with it. So a firm is there whole or not at all,
 * and a thousand postings wait for the disk once.
 */
export function joinedDataSource(dataSource: DataSource, runner: QueryRunner): DataSource {
  const kept: Partial<Record<PropertyKey, unknown>> = {
    startTransaction: nothing,
    commitTransaction: nothing,
    rollbackTransaction: nothing,
    release: nothing,
  };
  const joined = new Proxy(runner, {
    get: (target, name) => (name in kept ? kept[name] : Reflect.get(target, name, target)),
  });
  return new Proxy(dataSource, {
    get: (target, name) => (name === 'createQueryRunner' ? () => joined : Reflect.get(target, name, target)),
  });
}
