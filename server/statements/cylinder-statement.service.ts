import type { EntityManager } from 'typeorm';
import { ASSUMED_SCALE } from '../../shared/ledger/scale.ts';
import { dayAfter, startOfDay } from '../../shared/periods/month.ts';
import type { Locale } from '../../shared/session/session.schema.ts';
import {
  type CylinderStatement,
  STATEMENT_CSV_COLUMNS,
  STATEMENT_LIMITS,
  type StatementLine,
  type StatementQuery,
} from '../../shared/statements/cylinder-statement.schema.ts';
import { type PeriodDifference, statementFigures } from '../../shared/statements/statement-figures.ts';
import type { CylinderStep, ReadingCheck } from '../../shared/statements/walk-cylinder.ts';
import { dayInZone } from '../../shared/units/calendar.ts';
import { gramsOfMicrograms } from '../../shared/units/mass.ts';
import { type CsvCell, csvGrams, csvText } from '../books/csv-table.ts';
import { inFirm } from '../database/firm-scope.ts';
import { readLabels } from '../entries/place-labels.ts';
import type { Actor } from '../http/actor.ts';
import type { Parts } from '../http/parts.ts';
import { Problem, problemOfRefusals } from '../http/problem.ts';
import { columnHead } from '../messages/column-heads.ts';
import { readFirmMonths } from '../periods/firm-months.repository.ts';
import { type Holders, readHolders } from './cylinder-holder.repository.ts';
import { readStatementFacts, type StatementFacts } from './cylinder-statement.repository.ts';
import { readCylinderSteps } from './cylinder-steps.repository.ts';
import { rounded, statementLines, twoU } from './statement-lines.ts';

/** @throws Problem 404; 422 for a period that is too long or holds too much */
export function getStatement(
  parts: Pick<Parts, 'dataSource' | 'now'>,
  actor: Actor,
  cylinderId: string,
  query: StatementQuery,
): Promise<CylinderStatement> {
  return inFirm(parts.dataSource, actor, (manager) => statementOf(manager, parts.now(), actor, cylinderId, query));
}

async function statementOf(
  manager: EntityManager,
  now: Date,
  actor: Actor,
  cylinderId: string,
  query: StatementQuery,
): Promise<CylinderStatement> {
  const firm = await readFirmMonths(manager);
  const period = periodOf(query, dayInZone(now.getTime(), firm.timeZone), firm.timeZone);
  const range = { from: new Date(period.start), to: new Date(period.end) };
  const facts = await readStatementFacts(manager, cylinderId, { ...range, most: STATEMENT_LIMITS.entries });
  if (!facts) throw new Problem('notFound');
  if (facts.entries.length > STATEMENT_LIMITS.entries) {
    throw problemOfRefusals([{ code: 'statementTooLong', path: '/from', allowed: STATEMENT_LIMITS.entries }]);
  }
  const steps = (await readCylinderSteps(manager, [{ cylinderId, ...range }])).get(cylinderId) ?? [];
  const holders = await readHolders(manager, [cylinderId]);
  const labels = await readLabels(
    manager,
    facts.entries.map(({ counterId }) => counterId),
  );
  const closing = closingOf(facts);
  const opening = facts.entries.reduce((book, { mass }) => book - BigInt(mass), total(closing));
  const { checks, difference } = statementFigures(steps, opening, period.start);
  const { tare, ...cylinder } = facts.cylinder;
  return {
    cylinder: { ...cylinder, tareG: gramsOfMicrograms(BigInt(tare)) },
    firmName: facts.firmName,
    from: period.from,
    to: period.to,
    timeZone: firm.timeZone,
    openingG: gramsOfMicrograms(opening),
    ...sums(facts),
    closingG: gramsOfMicrograms(total(closing)),
    closingByRefrigerant: [...closing]
      .filter(([, mass]) => mass !== 0n)
      .sort(([a], [b]) => (a < b ? -1 : 1))
      .map(([refrigerant, mass]) => ({ refrigerant, massG: gramsOfMicrograms(mass) })),
    lines: statementLines(facts, opening, checks, labels, actor.locale),
    lastReading: lastReadingOf(checks, difference, steps, facts),
    difference: difference && {
      ...differenceFigures(difference.differenceMicrograms, difference),
      restsOnAt: utcOrNull(difference.restsOnAt),
    },
    differences: checks
      .filter((check) => check.verdict !== null && check.differenceMicrograms !== 0n)
      .filter((check) => check.postedMicrograms !== 0n || check.verdict !== 'withinScales')
      .map((check) => differenceOf(check, cylinderId, holders)),
    weighedBefore: facts.lastBefore === null ? null : new Date(facts.lastBefore).toISOString(),
  };
}

/** Both days included. @throws Problem 422 */
function periodOf({ from, to }: StatementQuery, today: string, timeZone: string) {
  const last = to ?? (from && from > today ? from : today);
  const first = from ?? `${last.slice(0, 7)}-01`;
  const [start, end] = [startOfDay(first, timeZone), startOfDay(dayAfter(last), timeZone)];
  if (end - start > STATEMENT_LIMITS.days * 24 * 60 * 60_000) {
    throw problemOfRefusals([{ code: 'statementPeriodTooLong', path: '/from', allowed: STATEMENT_LIMITS.days }]);
  }
  return { from: first, to: last, start, end };
}

/** The book at the end of the period: as it stands now, less what was posted into it later. */
function closingOf({ balance, later }: StatementFacts): Map<string, bigint> {
  const refrigerants = new Set([...Object.keys(balance ?? {}), ...Object.keys(later ?? {})]);
  return new Map(
    [...refrigerants].map((name) => [name, BigInt(balance?.[name] ?? 0) - BigInt(later?.[name] ?? 0)] as const),
  );
}
const total = (book: ReadonlyMap<string, bigint>): bigint => [...book.values()].reduce((sum, mass) => sum + mass, 0n);

const DIFFERENCES: ReadonlySet<string> = new Set(['cylinderDifference', 'supplierShortFill']);

function sums({ entries }: StatementFacts) {
  const parts = { cameIn: 0n, wentOut: 0n, opened: 0n, differences: 0n };
  for (const { mass, counterPlace, cancelled } of entries) {
    const size = BigInt(mass);
    if (cancelled) continue;
    if (DIFFERENCES.has(counterPlace)) parts.differences += size;
    else if (counterPlace === 'opening') parts.opened += size;
    else if (size > 0n) parts.cameIn += size;
    else parts.wentOut -= size;
  }
  return {
    cameInG: gramsOfMicrograms(parts.cameIn),
    wentOutG: gramsOfMicrograms(parts.wentOut),
    openedG: gramsOfMicrograms(parts.opened),
    differencesG: gramsOfMicrograms(parts.differences),
  };
}

function lastReadingOf(
  checks: readonly ReadingCheck[],
  difference: PeriodDifference | null,
  steps: readonly CylinderStep[],
  facts: StatementFacts,
): CylinderStatement['lastReading'] {
  const last = checks.at(-1);
  const step = steps.find(({ groupId }) => groupId === last?.groupId);
  const reading = step?.readings.find(({ id }) => id === last?.readingId);
  if (!last || !step || !reading) return null;
  return {
    at: new Date(last.at).toISOString(),
    groupId: last.groupId,
    grossG: gramsOfMicrograms(reading.grossMicrograms),
    tareG: gramsOfMicrograms(step.tareMicrograms),
    contentG: gramsOfMicrograms(last.contentMicrograms),
    toolName: facts.readings.find(({ id }) => id === reading.id)?.toolName ?? null,
    scale: { ...(reading.scale ?? ASSUMED_SCALE), assumed: reading.scale === null },
    expectedG: gramsOfMicrograms(difference?.expectedMicrograms ?? last.bookMicrograms),
  };
}

type Judged = Pick<PeriodDifference, 'uncertainty' | 'verdict'>;
const differenceFigures = (massMicrograms: bigint, { uncertainty, verdict }: Judged) => ({
  differenceG: gramsOfMicrograms(massMicrograms),
  standardUncertaintyG: rounded(uncertainty.standardG),
  twoUG: twoU(uncertainty.standardG),
  independentReadings: uncertainty.independentReadings,
  sharedReadings: uncertainty.sharedReadings,
  notWeighed: uncertainty.notWeighed,
  verdict,
});

function differenceOf(
  check: ReadingCheck,
  cylinderId: string,
  holders: Holders,
): CylinderStatement['differences'][number] {
  return {
    groupId: check.groupId,
    at: new Date(check.at).toISOString(),
    previousAt: utcOrNull(check.previousAt),
    bookG: gramsOfMicrograms(check.bookMicrograms),
    scaleG: gramsOfMicrograms(check.contentMicrograms),
    ...differenceFigures(check.differenceMicrograms, { ...check, verdict: check.verdict ?? 'withinScales' }),
    posted: check.postedMicrograms !== 0n,
    heldBetween: holders.between(cylinderId, check.previousAt, check.at),
  };
}

const utcOrNull = (at: number | null): string | null => (at === null ? null : new Date(at).toISOString());

export function statementCsv({ lines }: CylinderStatement, locale: Locale): string {
  return csvText(
    STATEMENT_CSV_COLUMNS.map((name) => columnHead(name, locale)),
    lines.map(csvRow),
  );
}

function csvRow(line: StatementLine): CsvCell[] {
  if (line.line === 'entry') {
    return [
      line.at,
      'entry',
      line.kind,
      line.refrigerant,
      csvGrams(line.massG),
      csvGrams(line.balanceG),
      line.counter.place,
      line.counter.label,
      line.howKnown,
      null,
      null,
      null,
      null,
      null,
      line.cancelled,
      line.late,
      line.bookingMonth,
      line.addedByServer,
      line.recordedByName,
      line.groupId,
      line.id,
    ];
  }
  return [
    line.at,
    'reading',
    line.moment,
    null,
    null,
    null,
    null,
    line.toolName,
    line.mode,
    csvGrams(line.grossG),
    csvGrams(line.contentG),
    csvGrams(line.differenceG),
    csvGrams(line.twoUG),
    line.verdict,
    line.cancelled,
    null,
    null,
    null,
    line.recordedByName,
    line.groupId,
    line.id,
  ];
}
