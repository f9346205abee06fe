import { describe, expect, it } from 'vitest';
import type { EntryRow } from '../../shared/entries/entry.schema.ts';
import type { Unit } from '../../shared/unit-register/unit.schema.ts';
import { loadReferenceData } from '../reference/load-reference-data.ts';
import { factoryChargeG, findGwp, isFluorinatedGas } from './unit-figures.ts';

const reference = loadReferenceData();
const unit = { id: 'u', refrigerant: 'R-454B' } as Unit;
const fromFactory = (groupId: string, refrigerant: string, massG: number) =>
  ({ groupId, refrigerant, massG, from: { place: 'factory' }, to: { place: 'unit', id: 'u' } }) as EntryRow;

describe('The factory charge of a machine', () => {
  it('is that of the new machine once the old one was replaced', () => {
    const entries = [fromFactory('a', 'R-454B', 1250), fromFactory('b', 'R-454B', 1300)];
    expect(factoryChargeG(entries, unit)).toBe(1300);
  });

  it('is nothing of this gas once the machine was converted to it', () => {
    expect(factoryChargeG([fromFactory('a', 'R-410A', 1250)], unit)).toBe(0);
  });

  it('is not known where nothing came from a factory', () => {
    expect(factoryChargeG([], unit)).toBeNull();
  });
});

describe('A fluorinated greenhouse gas', () => {
  it.each(['R-32', 'R-134a', 'R-410A', 'R-454B', 'R-455A', 'R-1234yf'])('is %s', (name) => {
    expect(isFluorinatedGas(reference, name)).toBe(true);
  });
  // Regulation (EU) 2024/573 lists none of them; R-22 is an ozone-depleting substance of (EU) 2024/590.
  it.each(['R-290', 'R-600a', 'R-744', 'R-717', 'R-1270', 'R-22'])('is not %s', (name) => {
    expect(isFluorinatedGas(reference, name)).toBe(false);
  });
});

describe('A GWP', () => {
  it('says where a component of it is from memory', () => {
    expect(findGwp(reference, 'R-454B', 'AR4')?.isFromMemory).toBe(true);
    expect(findGwp(reference, 'R-410A', 'AR4')?.isFromMemory).toBe(false);
  });
});
