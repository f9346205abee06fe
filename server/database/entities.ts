import type { MixedList } from 'typeorm';

/** Every table that is read or written through TypeORM. */
// biome-ignore lint/complexity/noBannedTypes: TypeORM's own type of an entity class
export const ENTITIES: MixedList<Function> = [];
