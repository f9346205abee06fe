import { DefaultNamingStrategy } from 'typeorm';

/** `massMicrograms` is the column `mass_micrograms`; an entity names only what this cannot guess. */
export class SnakeNaming extends DefaultNamingStrategy {
  override columnName(propertyName: string, customName: string | undefined): string {
    return customName ?? propertyName.replace(/[A-Z]/g, (letter) => `_${letter.toLowerCase()}`);
  }
}
