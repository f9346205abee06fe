import type { ValueTransformer } from 'typeorm';

/** `bigint` columns that hold micrograms: the driver hands them over as text. */
export const wholeNumber: ValueTransformer = {
  from: (value: string | null) => (value === null ? null : BigInt(value)),
  to: (value: bigint | null | undefined) => value?.toString() ?? value,
};

/** `bigint` columns that count and stay far below 2^53. */
export const safeInteger: ValueTransformer = {
  from: (value: string | null) => (value === null ? null : Number(value)),
  to: (value: number | null | undefined) => value,
};
