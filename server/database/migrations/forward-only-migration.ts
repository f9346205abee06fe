import type { MigrationInterface, QueryRunner } from 'typeorm';

/** Schema changes only go forward: a log that must not lose a row has no way back but a restored backup. */
export abstract class ForwardOnlyMigration implements MigrationInterface {
  abstract readonly name: string;
  abstract readonly statements: readonly string[];

  async up(runner: QueryRunner): Promise<void> {
    for (const statement of this.statements) await runner.query(statement);
  }

  async down(): Promise<void> {
    throw new Error(`${this.name} cannot be undone: restore a backup instead`);
  }
}
