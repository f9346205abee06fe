type Side = 'client' | 'server';
/** Whether dist/<side> was built from just these sources. */
export function isBuilt(what: { root: string; side: Side }): boolean;
/** Builds dist/<side> if its sources changed, and returns that folder. Throws a StartRefusal when the build fails. */
export function ensureBuilt(what: { root: string; side: Side }): string;
