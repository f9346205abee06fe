export interface PostgresPrograms {
  /** Folder that holds initdb and postgres. */
  folder: string;
  major: number;
}
export const oldestPostgresMajor: number;
/** Null when there is none, or none of that major version. PG_BIN goes before PATH, PATH before the packages' places. */
export function findPostgres(wanted?: { major?: number }): PostgresPrograms | null;
/** Installs Debian's package when root, else throws a StartRefusal with the line to run. */
export function requirePostgres(): PostgresPrograms;
export function findChromium(): string | null;
export function requireChromium(): string;
