import { describe, expect, it } from 'vitest';
import { createToolRequest, type Tool, updateToolRequest } from '../../../shared/tools/tools.schema.ts';
import { newId } from '../../lib/new-id.ts';
import { emptyQuantity, typeQuantity } from '../../ui/quantity-draft.ts';
import { emptyTool, relative, toolRequest, valuesOfTool } from './tool-values.ts';

const typed = (text: string) => typeQuantity<'mass'>(emptyQuantity('g'), text);

describe('A scale as it is typed', () => {
  it('carries its accuracy in grams and as a part of one: half an ounce, 0.05 %', () => {
    const { request } = toolRequest(
      { ...emptyTool(newId()), name: 'Field scale', resolution: typed('0.5 oz'), spanPercent: '0.05' },
      'en-US',
      false,
    );
    const parsed = createToolRequest.parse(request);
    expect(parsed.scale?.resolutionG).toBeCloseTo(14.1747615625, 9);
    expect(parsed.scale).toMatchObject({ repeatabilityG: 0, spanErrorRelative: 0.0005, offsetG: 0 });
  });

  it('needs the step of its display; what cannot be read says so itself', () => {
    const missing = toolRequest({ ...emptyTool(newId()), name: 'Scale' }, 'en-US', false);
    expect(createToolRequest.safeParse(missing.request).error?.issues[0]?.path).toEqual(['scale', 'resolutionG']);
    expect(toolRequest({ ...emptyTool(newId()), resolution: typed('small') }, 'en-US', false).unreadable).toEqual([
      'resolution',
    ]);
  });

  it('changes without its kind and comes back into the form as it was', () => {
    const tool: Tool = {
      id: newId(),
      kind: 'scale',
      name: 'Shop scale',
      serial: 'BN-20',
      scale: { resolutionG: 2, repeatabilityG: 1, spanErrorRelative: 0.0005, offsetG: 0 },
      madeOn: null,
      lastCheckedOn: '2026-06-02',
      heldBy: null,
      heldByName: null,
      version: 3,
    };
    const values = valuesOfTool(tool, 'es-ES');
    expect(values.spanPercent).toBe('0,05');
    const { request } = toolRequest(values, 'es-ES', true);
    expect(updateToolRequest.parse(request)).toEqual({
      name: 'Shop scale',
      serial: 'BN-20',
      scale: tool.scale,
      madeOn: null,
      lastCheckedOn: '2026-06-02',
      heldBy: null,
    });
  });
});

describe('A span error in per cent', () => {
  it.each([
    ['0.1', 0.001],
    ['0,05 %', 0.0005],
    ['', 0],
  ])('%s is %d', (text, expected) => {
    expect(relative(text)).toBe(expected);
  });

  it('that is no number is refused by the schema', () => {
    const { request } = toolRequest(
      { ...emptyTool(newId()), name: 'Scale', resolution: typed('5'), spanPercent: 'good' },
      'en-US',
      false,
    );
    expect(createToolRequest.safeParse(request).error?.issues[0]?.path).toEqual(['scale', 'spanErrorRelative']);
  });
});
