import { describe, expect, it } from 'vitest';
import { onScale, press, readTyped, shown, typedOf, usualUnit } from './scale-reading.ts';
import { keyed } from './weigh-in.fixture.ts';

describe('The number pad', () => {
  it('keeps a reading as it was keyed in, in the unit of the scale', () => {
    expect(typedOf(keyed('8437', 'g'))).toEqual({ value: '8437', unit: 'g' });
    expect(typedOf(keyed('17.105', 'kg'))).toEqual({ value: '17.105', unit: 'kg' });
    expect(typedOf(keyed('18l8.8', 'lbOz'))).toEqual({ value: '296.8', unit: 'oz' });
  });
  it('has no value while nothing, or half of it, is keyed in', () => {
    expect(typedOf(keyed('', 'g'))).toBeNull();
    expect(typedOf(keyed('18l', 'lbOz'))).toBeNull();
    expect(typedOf(keyed('18l17', 'lbOz'))).toBeNull();
    expect(typedOf(keyed('8.', 'kg'))).toEqual({ value: '8', unit: 'kg' });
  });
  it('takes away the last sign, and all', () => {
    expect(press(keyed('18l', 'lbOz'), 'back').text).toBe('18');
    expect(press(keyed('8437', 'g'), 'back').text).toBe('843');
    expect(press(keyed('8437', 'g'), 'clear').text).toBe('');
  });
  it('takes a second point or a leading nought for a slip', () => {
    expect(keyed('1.2.3', 'kg').text).toBe('1.23');
    expect(keyed('05', 'g').text).toBe('5');
    expect(keyed('.5', 'kg').text).toBe('0.5');
  });
});

describe('What a keyboard puts in', () => {
  it('is read with the decimal sign of the person and without grouping', () => {
    expect(readTyped('17,105', 'kg', ',').text).toBe('17.105');
    expect(readTyped('17,105', 'g', '.').text).toBe('17105');
    expect(readTyped('18 lb 8.8 oz', 'lbOz', '.').text).toBe('18lb8.8');
  });
});

describe('The window', () => {
  it('groups digits and keeps a trailing point in sight', () => {
    expect(shown(keyed('8437', 'g'), 'en-US', '.')).toBe('8,437');
    expect(shown(keyed('17.10', 'kg'), 'es-ES', ',')).toBe('17,10');
    expect(shown(keyed('17.', 'kg'), 'es-ES', ',')).toBe('17,');
    expect(shown(keyed('18l8', 'lbOz'), 'en-US', '.')).toBe('18\u00a0lb 8');
  });
  it('shows a stop as the scale would', () => {
    expect(onScale(8415, 'g', 5, 'en-US')).toBe('8,415\u00a0g');
    expect(onScale(-90, 'g', 1, 'en-US')).toBe('\u221290\u00a0g');
    expect(onScale(8415, 'kg', 5, 'es-ES')).toBe('8,415\u00a0kg');
    // 8,415 g are 296.83 oz: 18 lb 8.8 oz (1 oz = 28.349523125 g, exact).
    expect(onScale(8415, 'lbOz', 5, 'en-US')).toBe('18\u00a0lb 8.8\u00a0oz');
  });
});

describe('A scale that is new here', () => {
  it('is read in what it was made to show: ounces, pounds or grams', () => {
    expect(usualUnit(2.8349523125, 'lbOz')).toBe('lbOz');
    expect(usualUnit(2.8349523125, 'g')).toBe('oz');
    expect(usualUnit(4.5359237, 'lbOz')).toBe('lb');
    expect(usualUnit(5, 'lbOz')).toBe('g');
  });

  it('is read as this person reads masses when nobody knows its steps', () => {
    expect(usualUnit(null, 'lbOz')).toBe('lbOz');
    expect(usualUnit(null, 'g')).toBe('g');
  });
});
