import { expect, it } from 'vitest';
import { loadReferenceData } from './load-reference-data.ts';

it('loads every reference table at start, checked', () => {
  const reference = loadReferenceData();
  expect(reference.refrigerantDesignations()).toHaveLength(31);
  expect(reference.findSaturationTable('R-32')?.bubbleKPaAbs).toHaveLength(116);
  expect(reference.joints).toHaveLength(5);
  expect(reference.tubes).toHaveLength(36);
});
