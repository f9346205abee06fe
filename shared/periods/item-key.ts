import { z } from 'zod';

/** What can be open when a month is closed. */
export const OPEN_ITEM_KINDS = ['difference', 'weighIn', 'cylinder', 'job'] as const;
export type OpenItemKind = (typeof OPEN_ITEM_KINDS)[number];

export interface DifferenceIdentity {
  readonly groupId: string;
  readonly subjectId: string;
  /** `cylinderDifference`, ... */
  readonly kind: string;
  readonly refrigerant: string;
}

/** Names a difference: the statement that shows it, where, which kind, of what. */
export const differenceKey = ({ groupId, subjectId, kind, refrigerant }: DifferenceIdentity): string =>
  ['difference', groupId, subjectId, kind, refrigerant].join(':');

export const openItemKey = (kind: Exclude<OpenItemKind, 'difference'>, id: string): string => `${kind}:${id}`;

const UUID = '[0-9a-f]{8}(-[0-9a-f]{4}){3}-[0-9a-f]{12}';
export const itemKey = z
  .string()
  .regex(new RegExp(`^((weighIn|cylinder|job):${UUID}|difference:${UUID}:${UUID}:[A-Za-z]+:R-[0-9A-Za-z()]{1,15})$`));
