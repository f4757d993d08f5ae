/** Numbers in structure files: strict, because nothing unreadable may become 0. */

const PLAIN = /^[+-]?(?:\d+\.?\d*|\.\d+)(?:[eEdD][+-]?\d+)?$/;
const POWERS = Array.from({ length: 16 }, (_, n) => 10 ** n);

/**
 * The decimal number in text[start, end), blanks around it allowed; NaN when there is anything else.
 * Plain decimals of up to 15 digits are read exactly rounded without making a string: digits and a power of ten below 2⁵³ are
 * both exact, so their quotient is rounded once.
 */
export function decimalAt(text: string, start: number, end: number): number {
  while (start < end && text.charCodeAt(start) === 32) start++;
  while (end > start && text.charCodeAt(end - 1) === 32) end--;
  let i = start;
  const sign = text.charCodeAt(i);
  if (sign === 45 || sign === 43) i++;
  let digits = 0;
  let mantissa = 0;
  let decimals = -1;
  for (; i < end; i++) {
    const code = text.charCodeAt(i);
    if (code >= 48 && code <= 57) {
      mantissa = mantissa * 10 + (code - 48);
      digits++;
      if (decimals >= 0) decimals++;
    } else if (code === 46 && decimals < 0) decimals = 0;
    else return longNumber(text.slice(start, end));
  }
  if (digits === 0) return Number.NaN;
  if (digits > 15) return longNumber(text.slice(start, end));
  const value = decimals > 0 ? mantissa / POWERS[decimals]! : mantissa;
  return sign === 45 ? -value : value;
}

function longNumber(text: string): number {
  return PLAIN.test(text) ? Number(text.replace(/[dD]/, 'e')) : Number.NaN;
}

/** The decimal number a text is, Fortran's "1.0D+00" included; NaN when it is none. */
export const decimal = (text: string): number => decimalAt(text, 0, text.length);

/**
 * A CIF number with its standard uncertainty in units of the last digit: "1.234(5)" is 1.234 with 0.005.
 * The value is NaN when the text is no number; the uncertainty is 0 when none is stated.
 */
export function numberWithSu(text: string): readonly [value: number, su: number] {
  if (!text.endsWith(')')) return [decimal(text), 0];
  const open = text.indexOf('(');
  const value = decimal(text.slice(0, open));
  const digits = text.slice(open + 1, -1);
  const number = /^[+-]?\d*\.?(\d*)(?:[eEdD]([+-]?\d+))?$/.exec(text.slice(0, open));
  if (!number || !/^\d+$/.test(digits)) return [Number.NaN, 0];
  return [value, Number(digits) * 10 ** (Number(number[2] ?? 0) - number[1]!.length)];
}
