/**
 * Largest values of `shared/charge/charge.schema.ts`, in the request's units, so that a field can say so at once
 * without carrying the schema's library to a phone. `bounds.test.ts` holds the two against each other.
 */
export const BOUNDS = {
  lengthM: 10_000,
  massG: 10_000_000,
  gPerM: 100_000,
  riseM: 1000,
  equivalentMPerBend: 10,
  count: 1000,
  factor: 100,
  leastRoundingG: 0.001,
  roundingG: 10_000,
  areaM2: 100_000,
  nameLength: 60,
  labelLength: 80,
  expressionLength: 500,
} as const;
