import { asReturned } from '../calculations/decimals.ts';
import { done, type Outcome } from '../problems/outcome.ts';
import { snapSum } from '../units/round.ts';
import type { NetMassRequest, NetMassResponse } from './net-mass.schema.ts';
import { netMassUncertaintyG } from './scale-uncertainty.ts';

/** A net mass and what the scale can vouch for. Zeroing does not help: two readings are rounded either way. */
export function netMass(request: NetMassRequest): Outcome<NetMassResponse> {
  const netG = snapSum(request.beforeG, -request.afterG);
  const standardG = netMassUncertaintyG(request, netG);
  return done({
    netG: asReturned(netG, 'g'),
    standardUncertaintyG: asReturned(standardG, 'g'),
    expandedUncertaintyG: asReturned(2 * standardG, 'g'),
  });
}
