/** Micrograms as grams, exactly, without trailing zeros: 90718474n is `90.718474`, -5000000n is `-5`. */
export function gramsText(massMicrograms: bigint): string {
  const size = massMicrograms < 0n ? -massMicrograms : massMicrograms;
  const whole = size / 1_000_000n;
  const decimals = (size % 1_000_000n).toString().padStart(6, '0').replace(/0+$/, '');
  return `${massMicrograms < 0n ? '-' : ''}${whole}${decimals ? `.${decimals}` : ''}`;
}
