import type { JudgedGroup } from '../judged-group.ts';

/**
 * The rules a second time, in floating-point grams and straight from their text, for one reader's eye: one function,
 * nothing shared with the judge but the input. The tests hold the judge's books against these.
 */
export interface NaiveWorld {
  tareG(cylinderId: string, at: number): number;
  fullChargeG(unitId: string, at: number): number | null;
  refrigerantOf(cylinderId: string): string;
  unitRefrigerant: string;
}
type Book = Record<string, number>;
interface NaiveUnit {
  known: boolean;
  variance: number;
  losses: { r: string; place: string; left: number }[];
}

export function naiveBooks(groups: readonly JudgedGroup[], world: NaiveWorld): Record<string, Book> {
  const books: Record<string, Book> = {};
  const bookOf = (place: string): Book => {
    books[place] ??= {};
    return books[place];
  };
  const held = (place: string, r: string): number => bookOf(place)[r] ?? 0;
  const move = (from: string, to: string, r: string, grams: number): void => {
    bookOf(from)[r] = held(from, r) - grams;
    bookOf(to)[r] = held(to, r) + grams;
  };
  const opened = new Set<string>();
  const boughtUnweighed = new Set<string>();
  const units: Record<string, NaiveUnit> = {};
  const name = (place: { place: string; id?: string; as?: string }): string =>
    place.id ? `${place.place} ${place.id}` : place.as ? `${place.place} ${place.as}` : place.place;
  const clear = (grams: number): number => (Math.abs(grams) < 1e-6 ? 0 : grams);
  const exceeds = (grams: number, variance: number): boolean => Math.abs(grams) - 2 * Math.sqrt(variance) > 1e-7;

  for (const group of groups.filter((one) => !one.reversed).toSorted((a, b) => a.occurredAt - b.occurredAt)) {
    const masses = group.masses.map((mass) => ({
      r: mass.refrigerant,
      grams: Number(mass.massMicrograms) / 1e6,
      from: name(mass.from),
      to: name(mass.to),
      variance: mass.howKnown === 'weighed' && mass.scale ? variance(mass.scale, Number(mass.massMicrograms) / 1e6) : 0,
    }));
    for (const place of new Set(group.readings.map((reading) => `cylinder ${reading.cylinderId}`)))
      judgeCylinder(place);
    for (const place of new Set(masses.flatMap(({ from, to }) => [from, to]))) {
      if (
        place.startsWith('cylinder') &&
        !group.readings.some(({ cylinderId }) => place === `cylinder ${cylinderId}`)
      ) {
        moveInto(place);
      }
    }
    const unitIds = new Set(group.statements.map(({ id }) => `unit ${id}`));
    for (const { from, to } of masses)
      for (const place of [from, to]) if (place.startsWith('unit ')) unitIds.add(place);
    for (const place of unitIds) judgeUnit(place);
    for (const { r, grams, from, to } of masses) {
      // Cylinders and units were moved in their own turn; the other ends are moved here.
      if (!isJudged(from)) bookOf(from)[r] = held(from, r) - grams;
      if (!isJudged(to)) bookOf(to)[r] = held(to, r) + grams;
    }

    function isJudged(place: string): boolean {
      return place.startsWith('cylinder ') || place.startsWith('unit ');
    }
    function moveInto(place: string): void {
      for (const { r, grams, from, to } of masses) {
        if (from === place) bookOf(place)[r] = held(place, r) - grams;
        if (to === place) {
          bookOf(place)[r] = held(place, r) + grams;
          opened.add(place);
          if (from.startsWith('supplier')) boughtUnweighed.add(place);
        }
      }
    }
    function judgeCylinder(place: string): void {
      const brings = masses.some(({ to }) => to === place);
      const takes = masses.some(({ from }) => from === place);
      const mine = group.readings.filter(({ cylinderId }) => place === `cylinder ${cylinderId}`);
      const early = mine.filter(({ moment }) => moment === 'before' || (moment === 'only' && takes && !brings));
      for (const reading of early) weigh(reading, true);
      moveInto(place);
      for (const reading of mine.filter((one) => !early.includes(one))) weigh(reading, false);

      function weigh(reading: JudgedGroup['readings'][number], isEarly: boolean): void {
        const gross = Number(reading.grossMicrograms) / 1e6;
        const content = Math.max(0, gross - world.tareG(reading.cylinderId, group.occurredAt));
        const book = bookOf(place);
        const total = Object.values(book).reduce((sum, grams) => sum + grams, 0);
        const limit = variance(reading.scale, content) + reading.scale.offsetG ** 2 / 3;
        const falls = [...new Set([...Object.keys(book), ...masses.map(({ r }) => r)])].some((r) => {
          const net = masses.reduce(
            (sum, m) => sum + (m.r !== r ? 0 : m.to === place ? m.grams : m.from === place ? -m.grams : 0),
            0,
          );
          return clear(held(place, r) + (isEarly ? net : 0)) < 0;
        });
        if (exceeds(content - total, limit) || falls) {
          const counter = !opened.has(place)
            ? 'opening'
            : boughtUnweighed.has(place)
              ? 'supplierShortFill'
              : 'cylinderDifference';
          const positive = Object.values(book).reduce((sum, grams) => sum + Math.max(0, clear(grams)), 0);
          const keys = Object.keys(book).filter((r) => clear(held(place, r)) !== 0);
          const moved = masses.find(({ from, to }) => from === place || to === place)?.r;
          const only = keys.length === 1 ? keys[0] : undefined;
          const alone = only ?? moved ?? world.refrigerantOf(reading.cylinderId);
          for (const r of new Set([...keys, alone])) {
            const share = positive > 0 ? Math.max(0, held(place, r)) / positive : r === alone ? 1 : 0;
            move(counter, place, r, content * share - held(place, r));
          }
        }
        opened.add(place);
        boughtUnweighed.delete(place);
      }
    }
    function judgeUnit(place: string): void {
      const id = place.slice('unit '.length);
      units[place] ??= { known: false, variance: 0, losses: [] };
      const unit = units[place];
      const main = world.unitRefrigerant;
      const fullCharge = (r: string): number | null => (r === main ? world.fullChargeG(id, group.occurredAt) : null);
      const said = group.statements.find((statement) => statement.id === id)?.is ?? null;
      const outs = masses.filter(({ from }) => from === place);
      const ins = masses.filter(({ to }) => to === place);
      const starts = ins.filter(({ from }) => from === 'opening' || from === 'factory');
      const additions = ins.filter((mass) => !starts.includes(mass));
      const put = (list: typeof masses, sign: number): void => {
        for (const { r, grams } of list) bookOf(place)[r] = clear(held(place, r) + sign * grams);
      };
      const sumVariance = (list: typeof masses): number => list.reduce((sum, mass) => sum + mass.variance, 0);
      const takeBack = (r: string, grams: number): number => {
        let left = grams;
        for (const loss of unit.losses.toReversed()) {
          if (loss.r !== r) continue;
          const back = Math.min(loss.left, left);
          loss.left -= back;
          left -= back;
          move(loss.place, place, r, back);
        }
        return clear(left);
      };
      const lose = (r: string, grams: number): void => {
        move(place, 'atmosphere inferred', r, grams);
        unit.losses.push({ r, place: 'atmosphere inferred', left: grams });
      };
      const settleSurplus = (): void => {
        let settled = false;
        for (const r of Object.keys(bookOf(place)).toSorted()) {
          const surplus = -clear(held(place, r));
          if (surplus <= 0) continue;
          const left = exceeds(surplus, unit.variance) ? takeBack(r, surplus) : surplus;
          move('unitDifference', place, r, left);
          settled = true;
        }
        if (settled) unit.variance = 0;
      };
      const settleUnknown = (stated: Record<string, number> | 'empty'): void => {
        for (const r of new Set([...Object.keys(bookOf(place)), main])) {
          const sum = clear(held(place, r));
          const content = stated === 'empty' ? 0 : (stated[r] ?? Math.max(0, sum));
          const opening = Math.max(0, content - sum);
          move('opening', place, r, opening);
          const full = fullCharge(r);
          if (full !== null && full > opening) {
            move('opening', 'atmosphere beforeOurCare', r, full - opening);
            unit.losses.push({ r, place: 'atmosphere beforeOurCare', left: full - opening });
          }
          if (content < sum) lose(r, sum - content);
        }
        unit.known = true;
        unit.variance = 0;
      };

      if (said === 'empty') {
        put(outs, -1);
        unit.variance += sumVariance(outs);
        if (unit.known) {
          settleSurplus();
          for (const r of Object.keys(bookOf(place))) {
            const rest = clear(held(place, r));
            move(place, exceeds(rest, unit.variance) ? 'atmosphere inferred' : 'unitDifference', r, rest);
          }
        } else {
          settleUnknown('empty');
        }
        unit.variance = 0;
        unit.losses = [];
      }
      if (starts.length > 0 && !unit.known) {
        for (const r of Object.keys(bookOf(place))) if (held(place, r) < 0) move('opening', place, r, -held(place, r));
        unit.known = true;
      }
      put(starts, 1);
      const before = { ...bookOf(place) };
      put(additions, 1);
      if (said !== 'empty') put(outs, -1);
      const groupVariance = sumVariance(additions) + (said === 'empty' ? 0 : sumVariance(outs));
      unit.variance += groupVariance;
      if (!unit.known) {
        const full = fullCharge(main);
        if (said === 'full' && full !== null) settleUnknown({ [main]: full });
        return;
      }
      settleSurplus();
      const net = (r: string): number =>
        additions.reduce((sum, mass) => sum + (mass.r === r ? mass.grams : 0), 0) -
        (said === 'empty' ? 0 : outs.reduce((sum, mass) => sum + (mass.r === r ? mass.grams : 0), 0));
      const judged = new Set(additions.map(({ r }) => r).filter((r) => clear(net(r)) > 0));
      if (said === 'full' || said === 'notFull') judged.add(main);
      for (const r of [...judged].toSorted()) {
        const was = clear(before[r] ?? 0);
        const reference = fullCharge(r) ?? was;
        const over = clear(held(place, r) - reference);
        const asks = clear(net(r)) > 0 && over > 0 && exceeds(over, unit.variance);
        const answer = said === 'empty' ? null : said;
        const counts = answer ?? (asks ? (group.chargeSheetId ? 'moreThanFull' : 'notKnown') : null);
        if (counts === null || counts === 'moreThanFull' || (counts === 'notKnown' && !asks)) continue;
        if (!exceeds(over, unit.variance)) continue;
        if (over > 0) {
          const loss = Math.min(over, was, held(place, r));
          if (loss <= 0) continue;
          lose(r, loss);
          unit.variance = loss === over ? 0 : groupVariance;
        } else if (counts === 'full' && takeBack(r, -over) === 0) {
          unit.variance = 0;
        }
      }
    }
  }
  return books;
}

function variance(
  scale: { resolutionG: number; repeatabilityG: number; spanErrorRelative: number },
  grams: number,
): number {
  return 2 * (scale.resolutionG ** 2 / 12 + scale.repeatabilityG ** 2) + (scale.spanErrorRelative * grams) ** 2 / 3;
}
