export type ParsedNumber = { kind: 'number'; value: number } | { kind: 'empty' } | { kind: 'refused'; why: string };

/**
 * Reads a number as people type it: decimal point or decimal comma, spaces between thousands, a power of ten.
 * A comma before exactly three digits can be read two ways and is refused, because one of them is a thousand times the other.
 */
export function parseNumber(typed: string): ParsedNumber {
  const text = typed.trim().replace(/[\s\u00a0\u2009\u202f']/g, '').replace(/^\u2212/, '-');
  if (text === '') return { kind: 'empty' };
  if (/^-?[1-9]\d{0,2},\d{3}$/.test(text)) {
    const [whole, thousandth] = text.split(',');
    return { kind: 'refused', why: `"${typed.trim()}" can be read two ways: type ${whole}${thousandth} or ${whole}.${thousandth}` };
  }
  const point = /^-?\d{1,3}(,\d{3}){2,}(\.\d+)?$/.test(text) || /^-?\d{1,3}(,\d{3})+\.\d+$/.test(text) ? text.replaceAll(',', '') : text.replace(',', '.');
  if (!/^-?(\d+\.?\d*|\.\d+)(e[+-]?\d{1,3})?$/i.test(point)) return { kind: 'refused', why: `"${typed.trim()}" is not a number: type figures only, such as 12.5` };
  const value = Number(point);
  return Number.isFinite(value) ? { kind: 'number', value } : { kind: 'refused', why: `"${typed.trim()}" is too large a number` };
}
