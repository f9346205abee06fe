import { describe, expect, it } from 'vitest';
import { FAULT_CODES, Fault, report } from '../../shared/proof/verify.mjs';
import { messageFor } from '../messages/translate.ts';

const VALUES = { found: 8, from: 3, to: 9, at: '2026-11-30T15:00:00.000Z', known: 12, told: 6, file: 'proof.json' };

describe('What is found wrong', () => {
  it.each(FAULT_CODES)('is said in the same words by verifier, server and screen: %s', (code) => {
    const fault = new Fault(code, 7, VALUES);
    const words = { ...VALUES, sequence: 7 };
    expect(report(fault)[1]).toBe(messageFor(`proof.fault.${code}`, 'en-GB', words));
    expect(report(fault, 'es')[1]).toBe(messageFor(`proof.fault.${code}`, 'es-ES', words));
  });

  it('has a sentence of its own each', () => {
    const sentences = FAULT_CODES.map((code) => report(new Fault(code, 7, VALUES))[1]);
    expect(new Set(sentences).size).toBe(sentences.length);
    expect(sentences.filter((sentence) => /[{?}]/.test(String(sentence)))).toEqual([]);
  });
});
