import { expect, it } from 'vitest';
import { type EmissionEntry, emissions } from './emissions.ts';
import { g, place } from './judged-group-builder.ts';

const entry = (arrow: string, massG: number, bookingMonth: string, atLeast = false): EmissionEntry => {
  const [from = '', to = ''] = arrow.split(' -> ');
  return { refrigerant: 'R-410A', massMicrograms: g(massG), from: place(from), to: place(to), bookingMonth, atLeast };
};

it('a loss counts in its booking month, and negative in the month in which it is taken back', () => {
  const posted = [
    entry('U -> atmosphere:inferred', 150, '2026-03'),
    entry('atmosphere:inferred -> U', 146, '2026-05'),
    entry('C1 -> atmosphere:hose', 28, '2026-03'),
    entry('C1 -> cylinderDifference', 60, '2026-03'),
  ];
  expect(emissions(posted)).toEqual([
    emission('2026-03', 'hose', 28),
    emission('2026-03', 'inferred', 150),
    emission('2026-05', 'inferred', -146),
  ]);
});

it('what is only at least so much is named apart, and a difference counts once month close posts it', () => {
  const posted = [
    entry('U -> atmosphere:inferred', 300, '2026-03', true),
    entry('U -> atmosphere:inferred', 200, '2026-03'),
    entry('cylinderDifference -> atmosphere:measured', 60, '2026-04'),
  ];
  expect(emissions(posted)).toEqual([
    { ...emission('2026-03', 'inferred', 500), atLeastMicrograms: g(300) },
    emission('2026-04', 'measured', 60),
  ]);
});

it('what was reversed within its month leaves nothing', () => {
  const posted = [entry('C1 -> atmosphere:hose', 28, '2026-03'), entry('atmosphere:hose -> C1', 28, '2026-03')];
  expect(emissions(posted)).toEqual([]);
});

function emission(bookingMonth: string, as: string, massG: number) {
  return { bookingMonth, refrigerant: 'R-410A', as, massMicrograms: g(massG), atLeastMicrograms: 0n };
}
