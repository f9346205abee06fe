import { useMemo } from 'react';
import type { Cylinder } from '../../../shared/cylinders/cylinder.schema.ts';
import { useFormat } from '../../lib/format.ts';
import { useMessages } from '../../lib/messages.ts';
import { Beam } from '../../ui/beam/beam.tsx';
import { useBeamUnit } from '../../ui/beam/use-beam-unit.ts';
import { beamSummary, smallCylinderBeam } from './cylinder-beam.ts';

export function SmallBeam({ cylinder, className }: { cylinder: Cylinder; className: string }) {
  const t = useMessages();
  const format = useFormat();
  const unit = useBeamUnit();
  const spec = useMemo(() => smallCylinderBeam(cylinder, { t, format }, unit), [cylinder, t, format, unit]);
  return <Beam className={className} spec={spec} summary={beamSummary(cylinder, { t, format })} />;
}
