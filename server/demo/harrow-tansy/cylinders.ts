import { PRESSURE_FACTORS } from '../../../shared/units/factors.ts';
import { roundTo } from '../../../shared/units/round.ts';
import type { CylinderPlan } from '../cylinder-plan.ts';
import type { Typed } from '../demo-scale.ts';
import { HT, type HtKey } from './firm.ts';

const lb = (value: string): Typed => ({ value, unit: 'lb' });
const psig = (pressure: number): number => roundTo(pressure * PRESSURE_FACTORS.psi.perUnit.valueOf(), 0);
const present = (heldBy: HtKey | null, content: string) => ({
  atStart: { heldBy: heldBy && HT[heldBy].id, content: lb(content) },
});
type Beginning = ReturnType<typeof present> | Record<string, never>;

/** Thrown away when it is empty, its heel recovered. */
const oneWay = (
  tag: string,
  refrigerant: string,
  filled: string,
  tare: string,
  beginning: Beginning = {},
): CylinderPlan => ({
  tag,
  kind: 'nonRefillable',
  refrigerant,
  contentState: 'virgin',
  filled: lb(filled),
  tare: lb(tare),
  batch: `L${tag}-${refrigerant.slice(2)}`,
  ...beginning,
});

/** The supplier's, filled again and again. */
const rented = (
  tag: string,
  refrigerant: string,
  size: { filled: string; tare: string; waterCapacity: string },
  beginning: Beginning = {},
): CylinderPlan => ({
  tag,
  kind: 'refillable',
  refrigerant,
  contentState: 'virgin',
  filled: lb(size.filled),
  tare: lb(size.tare),
  waterCapacity: lb(size.waterCapacity),
  servicePressureKPaGauge: psig(600),
  retestInDays: 700 + Number(tag) / 10,
  isRented: true,
  ...beginning,
});
const hundred = { filled: '100', tare: '47.2', waterCapacity: '125' };
const fifty = { filled: '50', tare: '31.6', waterCapacity: '62' };

const small = { waterCapacity: lb('47.7'), servicePressureKPaGauge: psig(600) };
const large = { waterCapacity: lb('95.5'), servicePressureKPaGauge: psig(400) };
const recovery = (
  tag: string,
  refrigerant: string,
  tare: string,
  size: typeof small,
  retestInDays: number,
  beginning: Beginning,
): CylinderPlan => ({
  tag,
  kind: 'recovery',
  refrigerant,
  contentState: 'recovered',
  filled: null,
  tare: lb(tare),
  ...size,
  retestInDays,
  ...beginning,
});

/** Forty: those without a beginning are bought when the work asks for them. */
export const CYLINDERS: readonly CylinderPlan[] = [
  oneWay('7712', 'R-410A', '25', '6.4', present('dov', '17.3')),
  oneWay('7715', 'R-410A', '25', '6.4', present('bram', '21.85')),
  oneWay('7741', 'R-410A', '25', '6.5'),
  oneWay('7742', 'R-410A', '25', '6.5'),
  oneWay('7760', 'R-410A', '25', '6.4'),
  oneWay('7803', 'R-410A', '25', '6.4'),
  rented('5011', 'R-410A', fifty),
  rented('5012', 'R-410A', fifty),
  rented('5018', 'R-410A', fifty),
  rented('5023', 'R-410A', fifty),
  oneWay('3204', 'R-32', '20', '7.1'),
  oneWay('3219', 'R-32', '20', '7.1'),
  oneWay('3220', 'R-32', '20', '7.1'),
  oneWay('3231', 'R-32', '20', '7.0'),
  oneWay('4551', 'R-454B', '20', '7.2'),
  oneWay('4563', 'R-454B', '20', '7.2'),
  oneWay('2207', 'R-22', '30', '6.6', present(null, '11.42')),
  rented('5071', 'R-407C', fifty),
  oneWay('1341', 'R-134a', '30', '6.5', present('junia', '9.18')),
  rented('5134', 'R-134a', fifty),
  rented('9041', 'R-404A', hundred, present(null, '64.5')),
  rented('9058', 'R-404A', hundred),
  rented('9066', 'R-404A', hundred),
  rented('9112', 'R-448A', hundred),
  rented('9160', 'R-449A', hundred),
  recovery('RC-01', 'R-410A', '27.5', small, 410, present('dov', '4.16')),
  recovery('RC-02', 'R-410A', '27.6', small, 402, present('pia', '0')),
  recovery('RC-03', 'R-410A', '27.4', small, 12, present('bram', '9.71')),
  recovery('RC-04', 'R-410A', '27.5', small, 655, present('junia', '2.05')),
  recovery('RC-05', 'R-410A', '27.5', small, 655, present(null, '5.6')),
  recovery('RC-06', 'R-410A', '27.7', small, 655, present(null, '0')),
  recovery('RC-11', 'R-32', '27.5', small, 820, present(null, '0')),
  recovery('RC-12', 'R-32', '27.4', small, -31, present(null, '0')),
  recovery('RC-13', 'R-454B', '27.5', small, 820, present(null, '0')),
  recovery('RC-21', 'R-404A', '54.3', large, 233, present(null, '12.4')),
  recovery('RC-22', 'R-404A', '54.1', large, 233, present(null, '0')),
  recovery('RC-23', 'R-448A', '54.2', large, 610, present(null, '0')),
  recovery('RC-24', 'R-134a', '27.5', small, 233, present(null, '3.38')),
  recovery('RC-25', 'R-22', '27.6', small, 77, present(null, '6.2')),
  recovery('RC-26', 'R-407C', '27.4', small, 610, present(null, '0')),
];
