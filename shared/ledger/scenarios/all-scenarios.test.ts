import { describe, expect, it } from 'vitest';
import type { BookEntry } from '../book-entry.ts';
import { gramsText } from '../grams-text.ts';
import { SCENARIOS } from './all-scenarios.ts';
import type { OpenFlag, PostedLine } from './scenario.ts';
import { ScenarioRun } from './scenario-run.ts';

/** Source of every figure: 66 cases worked by hand, their arithmetic checked by script. */
const byText = <T>(list: readonly T[]): T[] => list.toSorted((a, b) => (text(a) < text(b) ? -1 : 1));
const text = (value: unknown): string => JSON.stringify(Object.entries(value as object).toSorted());
const lines = (posted: readonly PostedLine[]) => byText(posted);
const flags = (open: readonly OpenFlag[]) => byText(open);

it('holds all 66 cases', () => {
  const cases = SCENARIOS.flatMap((scenario) => scenario.cases.map(({ id }) => id));
  expect(SCENARIOS).toHaveLength(22);
  expect(new Set(cases).size).toBe(66);
});

describe.each(SCENARIOS)('$id $title', ({ cases }) => {
  it.each(cases)('$id: $title', (scenarioCase) => {
    const run = new ScenarioRun(scenarioCase);
    for (const step of scenarioCase.steps) {
      const outcome = run.perform(step.does);
      const where = `${scenarioCase.id} ${step.step}`;
      if (step.refused) {
        const [refusal] = outcome.ok ? [] : outcome.refusals;
        const { code, givenG, allowedG } = step.refused;
        expect(refusal, where).toMatchObject({ code, given: givenG, allowed: allowedG });
      } else {
        expect(outcome, where).toMatchObject({ ok: true });
        const posted = outcome.ok ? outcome.value.map((entry) => run.lineOf(entry)) : [];
        expect(lines(posted), `${where} posts`).toEqual(lines(step.posted));
        expect(outcome.ok && outcome.value.every((entry) => hasTimeOfStatement(run, entry)), where).toBe(true);
      }
      const booked = Object.keys(step.books).map((symbol) => [symbol, run.bookOf(symbol)]);
      expect(Object.fromEntries(booked), `${where} books`).toEqual(step.books);
      expect(flags(run.openFlags()), `${where} flags`).toEqual(flags(step.open));
      expectSoundBooks(run);
    }
    const { end } = scenarioCase;
    expect(byText(run.emissions())).toEqual(byText(end.emissions));
    expect(run.endPlaces()).toEqual(end.places);
    const counted = Object.keys(scenarioCase.start.units)
      .toSorted()
      .flatMap((unit) => run.counted(unit));
    expect(counted).toHaveLength(end.counted.length);
    expect(counted).toMatchObject(end.counted);
  });
});

/** A correction, like a reversal, has the `occurredAt` of what it corrects. */
const hasTimeOfStatement = ({ ledger }: ScenarioRun, entry: BookEntry): boolean =>
  entry.occurredAt === ledger.groups.get(entry.correctsGroupId ?? entry.groupId)?.occurredAt;

/** Every refrigerant sums to zero over all places; no cylinder and no known unit stands below zero. */
function expectSoundBooks({ ledger }: ScenarioRun): void {
  const sums: Record<string, bigint> = {};
  for (const { place, book } of ledger.allBalances()) {
    const hasFloor = place.place === 'cylinder' || (place.place === 'unit' && ledger.unitState(place.id).known);
    for (const [refrigerant, mass] of Object.entries(book)) {
      sums[refrigerant] = (sums[refrigerant] ?? 0n) + mass;
      if (hasFloor) expect(mass >= 0n, `${JSON.stringify(place)} ${gramsText(mass)}`).toBe(true);
    }
    if (place.place === 'cylinder') expect(ledger.cylinderState(place.id).book).toEqual(book);
    if (place.place === 'unit') expect(ledger.unitState(place.id).book).toEqual(book);
  }
  for (const sum of Object.values(sums)) expect(sum).toBe(0n);
}
