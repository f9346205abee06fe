import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { SCENARIOS } from '../../shared/ledger/scenarios/all-scenarios.ts';
import { startTestApp, type TestApp } from '../support/app.ts';
import { ScenarioOverHttp } from '../support/scenario-over-http.ts';

/** Source of every figure: 66 cases worked by hand, their arithmetic checked by script. */
let app: TestApp;
beforeAll(async () => {
  app = await startTestApp();
});
afterAll(() => app.close());

const text = (value: unknown): string => JSON.stringify(Object.entries(value as object).toSorted());
const byText = <T>(list: readonly T[]): T[] => list.toSorted((a, b) => (text(a) < text(b) ? -1 : 1));

describe.each(SCENARIOS)('$id through HTTP: $title', ({ cases }) => {
  it.each(cases)('$id: $title', async (scenarioCase) => {
    const played = new ScenarioOverHttp(scenarioCase);
    await played.start(app);
    for (const step of scenarioCase.steps) {
      const where = `${scenarioCase.id} ${step.step}`;
      const answer = await played.perform(step.does);
      if (step.refused) {
        const { code, givenG, allowedG } = step.refused;
        expect(answer, where).toMatchObject({
          status: 422,
          body: { code, errors: [{ given: givenG, allowed: allowedG }] },
        });
      } else if (answer) {
        expect(answer.status, `${where}: ${JSON.stringify(answer.body)}`).toBe(201);
        // What took a loss back is told by the group's view, not by the answer.
        const expected = step.posted.map(({ takenBack: _, ...line }) => line);
        expect(byText(played.lines(answer.body)), `${where} posts`).toEqual(byText(expected));
      }
      const books = await Promise.all(
        Object.keys(step.books).map(async (symbol) => [symbol, await played.bookOf(symbol)]),
      );
      expect(Object.fromEntries(books), `${where} books`).toEqual(step.books);
      expect(byText(await played.openFlags()), `${where} flags`).toEqual(byText(step.open));
    }
    const { end, start } = scenarioCase;
    expect(byText(await played.emissions())).toEqual(byText(end.emissions));
    expect(await played.endPlaces()).toEqual(end.places);
    const counted = (
      await Promise.all(
        Object.keys(start.units)
          .toSorted()
          .map((unit) => played.counted(unit)),
      )
    ).flat();
    expect(counted).toHaveLength(end.counted.length);
    expect(counted).toMatchObject(end.counted);
    for (const { status, now, before } of await played.resendAll()) {
      expect(status).toBe(200);
      expect(now, 'a resend answers as it was answered').toEqual(before);
    }
  });
});
