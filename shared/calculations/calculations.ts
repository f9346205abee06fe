import type { z } from 'zod';
import { co2eRequest, co2eResponse } from '../co2e/co2e.schema.ts';
import { co2e } from '../co2e/co2e.ts';
import { cylinderFillRequest, cylinderFillResponse } from '../cylinder-fill/cylinder-fill.schema.ts';
import { cylinderFill } from '../cylinder-fill/cylinder-fill.ts';
import { evacuationRequest, evacuationResponse } from '../evacuation/evacuation.schema.ts';
import { judgeEvacuation } from '../evacuation/judge-evacuation.ts';
import { findJointTorque } from '../joint-torque/find-joint-torque.ts';
import { jointTorqueRequest, jointTorqueResponse } from '../joint-torque/joint-torque.schema.ts';
import { lineContentRequest, lineContentResponse } from '../line-content/line-content.schema.ts';
import { lineContent } from '../line-content/line-content.ts';
import { judgePressureTest } from '../pressure-test/judge-pressure-test.ts';
import { pressureTestRequest, pressureTestResponse } from '../pressure-test/pressure-test.schema.ts';
import type { Outcome } from '../problems/outcome.ts';
import type { ReferenceData } from '../reference/reference-data.ts';
import { judgeRoomLimit } from '../room-limit/judge-room-limit.ts';
import { roomLimitRequest, roomLimitResponse } from '../room-limit/room-limit.schema.ts';
import { findSaturation } from '../saturation/find-saturation.ts';
import { saturationRequest, saturationResponse } from '../saturation/saturation.schema.ts';
import { netMassRequest, netMassResponse } from '../scale/net-mass.schema.ts';
import { netMass } from '../scale/net-mass.ts';
import { reconcileRequest, reconcileResponse } from '../scale/reconcile.schema.ts';
import { reconcile } from '../scale/reconcile.ts';
import {
  superheatSubcoolingRequest,
  superheatSubcoolingResponse,
} from '../superheat-subcooling/superheat-subcooling.schema.ts';
import { superheatSubcooling } from '../superheat-subcooling/superheat-subcooling.ts';
import type { Unsaid } from './say-messages.ts';

/** One call below `/api/v1`: mounted, validated and documented from this one object. */
export interface Calculation<Request extends z.ZodType, Response extends z.ZodType> {
  summary: string;
  description?: string;
  request: Request;
  response: Response;
  /** Pure. Items of `cautions`, `warnings` and `policies` have `params` where the answer has `message` (`sayMessages`). */
  calculate(request: z.output<Request>, reference: ReferenceData): Outcome<Unsaid<z.input<Response>>>;
}

/** Checks that the parts of a call fit together, and keeps their types. */
export const calculation = <Request extends z.ZodType, Response extends z.ZodType>(
  call: Calculation<Request, Response>,
): Calculation<Request, Response> => call;

/** The calls without sign-in that store nothing, by path. `charge` and `leak-rate` stand beside in their own folders. */
export const calculations = {
  '/calculations/pressure-test': calculation({
    summary: 'Nitrogen pressure test, compensated for temperature',
    description:
      'Ideal gas law with a real-gas note; the verdict "pass" means that no leak was seen, not that there is none.',
    request: pressureTestRequest,
    response: pressureTestResponse,
    calculate: judgePressureTest,
  }),
  '/calculations/evacuation': calculation({
    summary: 'Vacuum decay test, by limit and by shape',
    request: evacuationRequest,
    response: evacuationResponse,
    calculate: judgeEvacuation,
  }),
  '/calculations/saturation': calculation({
    summary: 'Bubble and dew point by pressure or by temperature',
    request: saturationRequest,
    response: saturationResponse,
    calculate: findSaturation,
  }),
  '/calculations/superheat-subcooling': calculation({
    summary: 'Superheat by the dew point, subcooling by the bubble point',
    request: superheatSubcoolingRequest,
    response: superheatSubcoolingResponse,
    calculate: superheatSubcooling,
  }),
  '/calculations/line-content': calculation({
    summary: 'What a line holds when it is full of one phase',
    description: 'Never in place of the rate in the unit’s manual.',
    request: lineContentRequest,
    response: lineContentResponse,
    calculate: lineContent,
  }),
  '/calculations/room-limit': calculation({
    summary: 'Charge of a flammable refrigerant against a room',
    description:
      'The manual’s own table governs where it is given; the formulas of the standard are a cross-check. Figures from ' +
      'memory are marked toBeConfirmed.',
    request: roomLimitRequest,
    response: roomLimitResponse,
    calculate: judgeRoomLimit,
  }),
  '/calculations/cylinder-fill': calculation({
    summary: 'The most that a recovery cylinder may hold',
    request: cylinderFillRequest,
    response: cylinderFillResponse,
    calculate: cylinderFill,
  }),
  '/calculations/co2e': calculation({
    summary: 'CO2 equivalent of a mass by a named GWP set',
    request: co2eRequest,
    response: co2eResponse,
    calculate: co2e,
  }),
  '/calculations/net-mass': calculation({
    summary: 'Net mass of two readings with its uncertainty',
    request: netMassRequest,
    response: netMassResponse,
    calculate: netMass,
  }),
  '/calculations/reconcile': calculation({
    summary: 'What left a cylinder against what was issued from it',
    request: reconcileRequest,
    response: reconcileResponse,
    calculate: reconcile,
  }),
  '/calculations/joint-torque': calculation({
    summary: 'General torque range of a flare joint',
    description: 'The range in the unit’s manual governs.',
    request: jointTorqueRequest,
    response: jointTorqueResponse,
    calculate: findJointTorque,
  }),
} as const;
export type CalculationPath = keyof typeof calculations;

/** A call whose types a loop need not know: what mounts and documents them all. */
export interface AnyCalculation {
  path: `/calculations/${string}`;
  summary: string;
  description?: string;
  request: z.ZodType;
  response: z.ZodType;
  /** Of a request that `request` has parsed. */
  calculate(request: unknown, reference: ReferenceData): Outcome<Unsaid<unknown>>;
}

/** Every call with its path, for the loop that mounts them. */
export const everyCalculation = (): AnyCalculation[] =>
  Object.entries(calculations).map(([path, call]) => ({ path, ...call }) as unknown as AnyCalculation);
