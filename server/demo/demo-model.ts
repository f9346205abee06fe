import type { ChargeBasis } from '../../shared/charge/charge.schema.ts';
import type { Typed } from './demo-scale.ts';

/** A machine of an invented maker with what its invented manual says about charging it. */
export interface DemoModel {
  name: string;
  /** As the nameplate has it. */
  factoryCharge: Typed;
  manual: { document: string; page: string };
  basis: ChargeBasis;
  /** Pipes of each branch, outside diameters in mm. */
  pipes: readonly { liquidOdMm: number; gasOdMm: number }[];
  designPressureHighKPaGauge: number;
  designPressureLowKPaGauge: number;
  subsector: 'residentialLightCommercial' | 'variableRefrigerantFlow' | 'other';
  /** Smallest room served, for flammable refrigerants. */
  roomM2: number | null;
}
