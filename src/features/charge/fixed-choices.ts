import type { GwpSet } from '../../../shared/reference/gwp.ts';
import type { RoomStandard } from '../../../shared/room-limit/room-limit.schema.ts';
import type { Allocation, Mounting, PrechargeScope, RateKind } from './charge-draft.ts';

/**
 * The closed lists of the request as the form offers them. `satisfies` makes a value that the schema does not know a
 * type error, and `bounds.test.ts` one that it knows and the form does not offer; the schemas' own lists would bring
 * their library along.
 */
export const RATE_KIND_CHOICES = [
  'flat',
  'byLiquidPipe',
  'stepped',
  'formula',
  'fixedMass',
] as const satisfies readonly RateKind[];
export const SCOPE_CHOICES = [
  'system',
  'systemPerBranch',
  'branch',
  'mass',
] as const satisfies readonly PrechargeScope[];
export const ALLOCATION_CHOICES = [
  'largestFirst',
  'smallestFirst',
  'proportional',
] as const satisfies readonly Allocation[];
export const MOUNTING_CHOICES = ['floor', 'window', 'wall', 'ceiling'] as const satisfies readonly Mounting[];
export const GWP_SET_CHOICES = [
  'AR4',
  'AR5',
  'AR6',
  'US-AIM',
  'US-84.64',
  'EU-2024-573',
] as const satisfies readonly GwpSet[];
export const ROOM_STANDARD_CHOICES = [
  'IEC 60335-2-40:2018',
  'IEC 60335-2-40:2022',
  'EN 378-1',
] as const satisfies readonly RoomStandard[];
