import { cleanup, render, screen } from '@testing-library/react';
import userEvent from '@testing-library/user-event';
import { useState } from 'react';
import { afterEach, beforeAll, beforeEach, describe, expect, it } from 'vitest';
import type { QuantityKind, UnitOf } from '../../shared/units/quantities.ts';
import { startMessages } from '../lib/messages.ts';
import { changePreferences, preferencesFor } from '../lib/preferences.ts';
import { baseOf, emptyQuantity, type QuantityDraft, quantityOf } from './quantity-draft.ts';
import { QuantityInput } from './quantity-input.tsx';

beforeAll(startMessages);
beforeEach(() => changePreferences(preferencesFor('en-GB')));
afterEach(cleanup);

/** A field that keeps its own draft and shows the value that it stores, in the kind's base unit. */
function Stored<Kind extends QuantityKind>({
  kind,
  unit,
  units,
  start,
  ...rest
}: {
  kind: Kind;
  unit: UnitOf<Kind>;
  units?: readonly UnitOf<Kind>[];
  start?: QuantityDraft<Kind>;
  min?: number;
  max?: number;
  error?: string;
}) {
  const [draft, setDraft] = useState(start ?? emptyQuantity<Kind>(unit));
  return (
    <>
      <QuantityInput kind={kind} label="Run" draft={draft} onChange={setDraft} units={units ?? [unit]} {...rest} />
      <output>{String(baseOf(kind, draft, { locale: 'en-GB' }))}</output>
    </>
  );
}

const stored = () => Number(screen.getByRole('status').textContent);
const field = () => screen.getByRole('textbox', { name: 'Run' });

describe('A quantity field', () => {
  // Exact factors: international yard and pound agreement, 1959.
  it.each([
    ['length', 'm', '12ft 6in', 3.81, '12 ft 6 in = 3.81 m'],
    ['length', 'm', '7,5', 7.5, '= 7.5 m'],
    ['pipeDiameter', 'mm', '3/8', 9.525, '3/8 in = 9.53 mm'],
    ['mass', 'g', '11 lb 4.5 oz', 5117.0889240625, '11 lb 4.5 oz = 5,117 g'],
    ['massPerLength', 'g/m', '0.6 oz/ft', 55.80614788, '0.6 oz/ft = 55.8 g/m'],
  ] as const)('of the kind %s in %s understands %s and says so', async (kind, unit, text, base, understood) => {
    render(<Stored kind={kind as 'length'} unit={unit as 'm'} />);
    await userEvent.type(field(), text);
    expect(stored()).toBeCloseTo(base, 6);
    expect(field()).toHaveAccessibleDescription(
      understood.replace(/ (?=(m|mm|g|g\/m|ft|in|lb|oz|oz\/ft)\b)/g, '\u00a0'),
    );
  });

  it('asks which of two is meant by a separator before three digits, and takes the answer', async () => {
    render(<Stored kind="mass" unit="g" />);
    await userEvent.type(field(), '1,250');
    expect(screen.getByText('1,250: which one is it?')).toBeVisible();
    expect(Number.isNaN(stored())).toBe(true);

    await userEvent.click(screen.getByRole('button', { name: '1250\u00a0g' }));
    expect(stored()).toBe(1250);
    expect(screen.queryByText('1,250: which one is it?')).toBeNull();

    await userEvent.clear(field());
    await userEvent.type(field(), '1,250');
    await userEvent.click(screen.getByRole('button', { name: '1.25\u00a0g' }));
    expect(stored()).toBe(1.25);
  });

  it('shows another unit without changing the stored value, there and back again', async () => {
    render(<Stored kind="length" unit="ft" units={['ft', 'm']} />);
    await userEvent.type(field(), '39ft 4in');
    const before = stored();
    expect(before).toBeCloseTo(11.9888, 9);

    const unit = screen.getByRole('combobox', { name: 'Unit for: Run' });
    await userEvent.selectOptions(unit, 'm');
    expect(field()).toHaveValue('11.99');
    expect(stored()).toBe(before);

    await userEvent.selectOptions(unit, 'ft');
    expect(field()).toHaveValue('39.33');
    expect(stored()).toBe(before);
  });

  it('keeps a stored metric value exactly while it is shown in feet', () => {
    render(<Stored kind="length" unit="ft" units={['ft', 'm']} start={quantityOf('length', 12, 'ft', 'en-GB')} />);
    expect(field()).toHaveValue('39.37');
    expect(stored()).toBe(12);
    expect(field()).toHaveAccessibleDescription('= 12\u00a0m');
  });

  it('says beside the field what was given and what is allowed, at once', async () => {
    render(<Stored kind="length" unit="m" max={25} />);
    await userEvent.type(field(), '25.5');
    expect(screen.getByRole('alert')).toHaveTextContent('25.5 m is above the most, 25 m.');
    expect(field()).toBeInvalid();
    expect(field()).toHaveAccessibleDescription(/25\.5\sm is above the most/);
  });

  it('waits with words about the form of a value until the field is left, and keeps what was typed', async () => {
    render(<Stored kind="length" unit="m" units={['m', 'ft']} />);
    await userEvent.type(field(), '12 furlongs');
    expect(screen.queryByRole('alert')).toBeNull();
    await userEvent.tab();
    expect(screen.getByRole('alert')).toHaveTextContent('“furlongs” is not a unit this field knows. It takes m, ft.');
    expect(field()).toHaveValue('12 furlongs');
  });

  it('gives the word to an error from elsewhere', async () => {
    render(<Stored kind="length" unit="m" error="The manual allows 25 m." />);
    await userEvent.type(field(), '26');
    expect(screen.getByRole('alert')).toHaveTextContent('The manual allows 25 m.');
  });

  it('names what was typed and what it takes before anything that is said of it from elsewhere', async () => {
    const { rerender } = render(<Stored kind="mass" unit="g" units={['g', 'kg']} max={10_000} error="Not valid." />);
    await userEvent.type(field(), '20 kg');
    expect(screen.getByRole('alert')).toHaveTextContent('20,000 g is above the most, 10,000 g.');
    await userEvent.clear(field());
    await userEvent.type(field(), '0.001 t');
    expect(screen.getByRole('alert')).toHaveTextContent('“t” is not a unit this field knows. It takes g, kg.');
    rerender(<Stored kind="mass" unit="g" units={['g', 'kg']} max={10_000} />);
    expect(screen.queryByRole('alert')).toBeNull();
    await userEvent.clear(field());
    await userEvent.type(field(), '5');
    rerender(<Stored kind="mass" unit="g" units={['g', 'kg']} max={10_000} error="The scale says otherwise." />);
    expect(screen.getByRole('alert')).toHaveTextContent('The scale says otherwise.');
  });

  it('tells a stored value beside its unit without decimals that nobody reads', () => {
    // 62 lb of water: 28,122.72694 g.
    render(<Stored kind="mass" unit="lb" units={['lb', 'g']} start={quantityOf('mass', 28122.72694, 'lb', 'en-GB')} />);
    expect(field()).toHaveAccessibleDescription('= 28,122.73\u00a0g');
    expect(stored()).toBe(28122.72694);
  });
});
