import { done, type Outcome, refused } from '../problems/outcome.ts';
import { nearestByOd } from '../reference/find-tube.ts';
import type { ReferenceData } from '../reference/reference-data.ts';
import type { JointTorqueRequest, JointTorqueResponse } from './joint-torque.schema.ts';

/** The general range for a flare joint. An outside diameter without one is refused (`noGeneralTorque`), never guessed. */
export function findJointTorque(
  { odMm }: JointTorqueRequest,
  { joints }: Pick<ReferenceData, 'joints'>,
): Outcome<JointTorqueResponse> {
  const joint = nearestByOd(joints, (row) => row.odMm, odMm);
  if (!joint) {
    const allowed = joints.map((row) => row.odMm);
    return refused({ code: 'noGeneralTorque', path: '/odMm', given: odMm, allowed });
  }
  return done({
    minNm: joint.torqueMinNm,
    maxNm: joint.torqueMaxNm,
    minFtLbf: joint.torqueMinFtLbf,
    maxFtLbf: joint.torqueMaxFtLbf,
    acrossFlatsMm: joint.acrossFlatsMmR410AR32,
    source: joint.source,
  });
}
