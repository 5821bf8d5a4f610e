/** A header number with what its digits say about its rounding. */
export interface HeaderNumber {
  readonly value: number;
  /** Largest error when the last printed digit was rounded; trailing zeros after the point count as unknown digits. */
  readonly roundingLoose: number;
  /** The same for the digits as printed; 0 for whole numbers. */
  readonly rounding: number;
  readonly hasComma: boolean;
}

const form = /^([+-]?)(\d{0,40})(?:([.,])(\d{0,40}))?(?:[eE]([+-]?\d{1,3}))?$/;

/**
 * Parses one header number in AFFN, or with a decimal comma where that can mean nothing else.
 *
 * A comma with exactly three digits after it and one to three before (`1,024`) could separate thousands: not understood, except
 * after a leading zero.
 *
 * @param text without comment; blanks at both ends allowed
 * @returns the number, or in one word why not
 * @source JCAMP-DX 4.24, section 4 (AFFN)
 */
export function parseNumber(text: string): HeaderNumber | 'not-a-number' | 'comma-ambiguous' {
  const match = form.exec(text.trim());
  if (!match) return 'not-a-number';
  const [, sign, whole = '', point, fraction = '', exponent = '0'] = match;
  if (whole === '' && fraction === '') return 'not-a-number';
  if (point === ',' && fraction.length === 3 && !/^0*$/.test(whole)) return 'comma-ambiguous';
  if (point === ',' && (whole === '' || fraction === '')) return 'not-a-number';
  const value = Number(`${sign}${whole || '0'}.${fraction || '0'}e${exponent}`);
  if (!Number.isFinite(value)) return 'not-a-number';
  const kept = fraction.replace(/0+$/, '').length;
  const scale = Number(exponent);
  return {
    value,
    roundingLoose: 0.5 * 10 ** (scale - kept),
    rounding: fraction === '' ? 0 : 0.5 * 10 ** (scale - fraction.length),
    hasComma: point === ',',
  };
}
