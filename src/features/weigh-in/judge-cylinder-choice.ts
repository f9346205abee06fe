import type { Cylinder } from '../../../shared/cylinders/cylinder.schema.ts';
import { isRetestOverdue } from '../../../shared/cylinders/retest.ts';

/** Why this cylinder cannot be planned with. What has happened is another matter: the log takes it, with its reason. */
export type Stopper =
  | 'otherRefrigerant'
  | 'pressureRating'
  | 'mixed'
  | 'customersOwn'
  | 'notReclaimed'
  | 'empty'
  | 'openWeighIn';
/** What speaks against it and does not stop the work. */
export type Doubt = 'tooLittle' | 'retestDue' | 'ratingNotKnown' | 'sameOwner' | 'notCleaned' | 'neverWeighed';

export interface JudgedCylinder {
  cylinder: Cylinder;
  onVan: boolean;
  stopper: Stopper | null;
  doubts: Doubt[];
}

/** People can come to harm: these carry the signal word. */
export const DANGEROUS: ReadonlySet<Stopper> = new Set(['otherRefrigerant', 'pressureRating', 'mixed']);

/**
 * The cylinders of the firm as a choice for this unit: those on one's own van first, within each those that fit before
 * those that do not, then the fuller ones.
 */
export function judgeCylinders(
  cylinders: readonly Cylinder[],
  {
    refrigerant,
    wantedG,
    myId,
    today,
    jurisdiction,
  }: {
    refrigerant: string;
    wantedG: number | null;
    myId: string | null;
    today: string;
    /** Of the unit's site. */
    jurisdiction: 'US' | 'EU' | null;
  },
): JudgedCylinder[] {
  return cylinders
    .filter((cylinder) => !isEmptyRecovery(cylinder))
    .map((cylinder) => ({
      cylinder,
      onVan: myId !== null && cylinder.heldBy === myId,
      stopper: stopperOf(cylinder, refrigerant, jurisdiction),
      doubts: doubtsOf(cylinder, wantedG, today, jurisdiction),
    }))
    .sort(
      (a, b) =>
        Number(a.stopper !== null) - Number(b.stopper !== null) ||
        Number(b.onVan) - Number(a.onVan) ||
        a.doubts.length - b.doubts.length ||
        b.cylinder.contentG - a.cylinder.contentG,
    );
}

/** May what is left in the hose be recovered into this cylinder: meant for it, holding nothing else, borne by it, tested. */
export const mayTakeHose = (cylinder: Cylinder, refrigerant: string, today: string): boolean =>
  cylinder.kind === 'recovery' &&
  cylinder.refrigerant === refrigerant &&
  cylinder.byRefrigerant.every((part) => part.massG <= 0 || part.refrigerant === refrigerant) &&
  cylinder.pressureRatingHolds !== false &&
  !isRetestOverdue(cylinder.retestDue, today);

/** Nobody looks for a charge in a recovery cylinder that nothing has gone into. */
const isEmptyRecovery = ({ kind, contentG }: Cylinder) => kind === 'recovery' && contentG <= 0;

/** Neither fluorinated gases (EU) nor under the US ban in every use. */
const NATURAL: ReadonlySet<string> = new Set(['R-290', 'R-600a', 'R-1270', 'R-717', 'R-744']);

/**
 * What the law says of recovered refrigerant that nobody has cleaned: in the EU it goes into no equipment before it is
 * recycled or reclaimed (Regulation (EU) 2024/573, Article 8(6)); in the US only into the same owner's (40 CFR
 * 82.154(d), 82.156(h)). Neither speaks of natural refrigerants.
 */
function recoveredIs({ contentState, refrigerant }: Cylinder, jurisdiction: 'US' | 'EU' | null) {
  if (contentState !== 'recovered') return null;
  if (NATURAL.has(refrigerant) || jurisdiction === null) return 'notCleaned';
  return jurisdiction === 'EU' ? 'notReclaimed' : 'sameOwner';
}

function stopperOf(cylinder: Cylinder, refrigerant: string, jurisdiction: 'US' | 'EU' | null): Stopper | null {
  if (cylinder.mixed) return 'mixed';
  if (cylinder.refrigerant !== refrigerant) return 'otherRefrigerant';
  if (cylinder.byRefrigerant.some((part) => part.refrigerant !== refrigerant && part.massG > 0))
    return 'otherRefrigerant';
  if (cylinder.pressureRatingHolds === false) return 'pressureRating';
  if (cylinder.owner.kind === 'customer') return 'customersOwn';
  if (recoveredIs(cylinder, jurisdiction) === 'notReclaimed') return 'notReclaimed';
  if (cylinder.openWeighInGroupId !== null) return 'openWeighIn';
  // A cylinder that nobody has weighed yet may hold anything: its first reading says.
  return cylinder.contentG <= 0 && cylinder.lastWeighedAt !== null ? 'empty' : null;
}

function doubtsOf(
  cylinder: Cylinder,
  wantedG: number | null,
  today: string,
  jurisdiction: 'US' | 'EU' | null,
): Doubt[] {
  const doubts: Doubt[] = [];
  if (cylinder.lastWeighedAt === null && cylinder.contentG <= 0) doubts.push('neverWeighed');
  else if (wantedG !== null && cylinder.contentG < wantedG) doubts.push('tooLittle');
  if (isRetestOverdue(cylinder.retestDue, today)) doubts.push('retestDue');
  if (cylinder.pressureRatingHolds === null) doubts.push('ratingNotKnown');
  const recovered = recoveredIs(cylinder, jurisdiction);
  if (recovered === 'sameOwner' || recovered === 'notCleaned') doubts.push(recovered);
  return doubts;
}
