import type { Fixture } from '../calculations/fixture.ts';
import type { JointTorqueRequest, JointTorqueResponse } from './joint-torque.schema.ts';

const source = 'published installation manuals (general table; JIS B 8607 and ISO 14903 themselves not read)';

export const jointTorqueFixtures: readonly Fixture<JointTorqueRequest, JointTorqueResponse>[] = [
  {
    name: '1/4 in',
    source: 'general table of published installation manuals',
    request: { odMm: 6.35 },
    result: { minNm: 14.2, maxNm: 17.2, minFtLbf: 10.5, maxFtLbf: 12.7, acrossFlatsMm: 17, source },
  },
  {
    name: '1/2 in: the nut of R-410A and R-32 is 26 mm, not the 24 mm of R-22',
    source: 'general table of published installation manuals',
    request: { odMm: 12.7 },
    result: { minNm: 49.5, maxNm: 60.3, minFtLbf: 36.5, maxFtLbf: 44.5, acrossFlatsMm: 26, source },
  },
];
