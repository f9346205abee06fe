import { chargeCalculation } from '../../shared/charge/charge-calculation.ts';
import type { ReferenceData } from '../../shared/reference/reference-data.ts';
import type { Session } from '../../shared/session/session.schema.ts';
import { LENGTH_FACTORS } from '../../shared/units/factors.ts';
import { roundTo } from '../../shared/units/round.ts';
import type { DemoModel } from './demo-model.ts';
import { gramsOf, gramsPer, type Typed } from './demo-scale.ts';
import { type Diary, laterBy, type Moment } from './diary.ts';
import type { Draws } from './draws.ts';
import type { FieldUnit, PipeRun, UnitPlan } from './unit-plan.ts';

/** Enters units with their papers, and works out what an install has to weigh in. */
export class UnitRegister {
  readonly units: FieldUnit[];
  private readonly facts: {
    diary: Diary;
    draws: Draws;
    reference: ReferenceData;
    gwpSet: Session['firm']['gwpSet'];
    siteIdOf(key: string): string;
  };

  constructor(facts: UnitRegister['facts'], plans: readonly UnitPlan[], idsFrom: Date) {
    this.facts = facts;
    this.units = plans.map((plan) => ({
      ...plan,
      id: facts.diary.id(idsFrom),
      fullG: 0,
      contentG: 0,
      isThere: false,
      visits: [],
    }));
  }

  require(tag: string): FieldUnit {
    const found = this.units.find((unit) => unit.tag === tag);
    if (!found) throw new Error(`no unit ${tag}`);
    return found;
  }

  /** The unit of a story that is told of that day: ordinary visits leave it alone for some weeks around it. */
  expect(tag: string, daysAgo: number): FieldUnit {
    const unit = this.require(tag);
    unit.visits.push(daysAgo);
    return unit;
  }

  /** A machine that was there before: in order, or holding nobody knows how much. */
  takeOver(moment: Moment, unit: FieldUnit, day: string): void {
    const { fullCharge, beginning } = unit;
    const isKnown = beginning.kind === 'taken over';
    unit.fullG = fullCharge ? gramsOf(fullCharge) : beginning.kind === 'not known' ? beginning.heldG * 1.2 : 0;
    unit.contentG = beginning.kind === 'not known' ? beginning.heldG : unit.fullG;
    const initial = isKnown && fullCharge ? { state: 'opening' as const, mass: fullCharge } : null;
    this.create(moment, unit, { day, initial, fullCharge, installedOn: null });
    if (unit.model) this.addBasis(laterBy(moment, 2), unit, unit.model);
  }

  /**
   * A new machine on its first day: factory charge, the manual's page, the pipe as run, and the charge sheet.
   * @returns what to weigh in, and the sheet; none where the pipe is longer than the manual allows
   */
  install(
    moment: Moment,
    unit: FieldUnit,
    { day, jobId, pipe }: { day: string; jobId: string; pipe: PipeRun },
  ): { extraG: number; chargeSheetId: string | null } {
    const { diary, draws, reference, gwpSet } = this.facts;
    const { model } = unit;
    if (!model) throw new Error(`${unit.tag} was installed without a manual`);
    const branches = branchesOf(model, pipe);
    const lineSet = {
      branches: branches.map(({ typedLength: _typed, reused: _reused, ...branch }) => ({ ...branch, bends: 4 })),
    };
    const request = { job: 'newInstall' as const, basis: model.basis, lineSet, gwpSet };
    const calculated = chargeCalculation.calculate(request, reference);
    const extraG = calculated.ok ? calculated.value.weighInG : extraBeyondManual(model, branches);
    const mass = plusExtra(model.factoryCharge, extraG);
    unit.fullG = gramsOf(mass);
    unit.contentG = gramsOf(model.factoryCharge);
    const initial = { state: 'factory' as const, mass: model.factoryCharge };
    this.create(moment, unit, { day, initial, fullCharge: mass, installedOn: day });
    this.addBasis(laterBy(moment, 6), unit, model);
    const piped = laterBy(moment, 140);
    diary.write(piped, {
      call: 'addLineSet',
      id: unit.id,
      request: { id: diary.id(piped.at), validFrom: piped.at.toISOString(), branches },
    });
    if (!calculated.ok) return { extraG, chargeSheetId: null };
    const sheet = laterBy(moment, 155);
    const chargeSheetId = diary.id(sheet.at);
    const room = model.roomM2 === null ? null : { areaM2: model.roomM2 + draws.whole(0, 6), mounting: 'wall' as const };
    diary.write(sheet, {
      call: 'createChargeSheet',
      id: unit.id,
      request: { id: chargeSheetId, request, manual: model.manual, room, jobId },
    });
    return { extraG, chargeSheetId };
  }

  private create(
    moment: Moment,
    unit: FieldUnit,
    known: {
      day: string;
      initial: { state: 'factory' | 'opening'; mass: Typed } | null;
      fullCharge: Typed | null;
      installedOn: string | null;
    },
  ): void {
    const { diary, draws } = this.facts;
    const at = moment.at.toISOString();
    const { initial, fullCharge } = known;
    const isReadable = unit.nameplateReadable ?? true;
    diary.write(moment, {
      call: 'createUnit',
      request: {
        id: unit.id,
        siteId: this.facts.siteIdOf(unit.siteKey),
        tag: unit.tag,
        name: unit.name,
        applianceKind: unit.applianceKind,
        subsector: unit.subsector ?? unit.model?.subsector ?? null,
        refrigerant: unit.refrigerant,
        refrigerantFrom: known.day,
        serials: isReadable ? [{ part: 'outdoor', serial: serialFrom(draws), model: unit.model?.name ?? null }] : [],
        nameplateReadable: isReadable,
        designPressureHighKPaGauge: unit.model?.designPressureHighKPaGauge ?? null,
        designPressureLowKPaGauge: unit.model?.designPressureLowKPaGauge ?? null,
        installedOn: known.installedOn,
        fullCharge: fullCharge && {
          id: diary.id(moment.at),
          mass: fullCharge,
          method: known.installedOn ? 'calculation' : 'manufacturer',
          validFrom: at,
        },
        initialCharge: initial
          ? { ...initial, at, entryId: diary.id(moment.at), groupId: diary.id(moment.at) }
          : { state: 'notKnown' },
      },
    });
    unit.isThere = true;
  }

  private addBasis(moment: Moment, unit: FieldUnit, { basis, manual }: DemoModel): void {
    const { diary } = this.facts;
    const request = { id: diary.id(moment.at), validFrom: moment.at.toISOString(), basis, manual };
    diary.write(moment, { call: 'addChargeBasis', id: unit.id, request });
  }
}

function branchesOf(model: DemoModel, { lengths, rise, unit }: PipeRun) {
  const perM = LENGTH_FACTORS[unit].perUnit.valueOf();
  return lengths.map((length, index) => ({
    name: lengths.length === 1 ? 'Line set' : `Head ${index + 1}`,
    liquidOdMm: model.pipes[index]?.liquidOdMm ?? 6.35,
    gasOdMm: model.pipes[index]?.gasOdMm ?? 9.525,
    lengthM: roundTo(length * perM, 4),
    riseM: roundTo(rise * perM, 4),
    bends: 4,
    typedLength: { value: String(length), unit },
    reused: false,
  }));
}

/** Where the manual ends, somebody asked the maker and was told its flat rate for the whole length. */
function extraBeyondManual({ basis }: DemoModel, branches: readonly { lengthM: number }[]): number {
  const lengthM = branches.reduce((sum, branch) => sum + branch.lengthM, 0) - (basis.precharge?.lengthM ?? 0);
  return basis.rate.kind === 'flat' ? lengthM * basis.rate.gPerM : 0;
}

/** In the nameplate's unit, to a tenth of an ounce or whole grams. */
function plusExtra(factory: Typed, extraG: number): Typed {
  const decimals = factory.unit === 'kg' ? 3 : factory.unit === 'g' ? 0 : factory.unit === 'lb' ? 2 : 1;
  return { value: (Number(factory.value) + extraG / gramsPer(factory.unit)).toFixed(decimals), unit: factory.unit };
}

const serialFrom = (draws: Draws): string => `${draws.hex(2).toUpperCase()}${draws.whole(100_000, 999_999)}`;
