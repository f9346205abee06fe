import { v7 } from 'uuid';

/** A UUID version 7 (RFC 9562) for a record that this browser makes. Make it when the form opens, not at each click. */
export const newId = (): string => v7();
