/** A value of unknown unit, with four digits that count: "0.0812", "49.6", "12,480". */
export function valueWords(value: number): string {
  const size = Math.abs(value);
  if (size >= 1_000) return Math.round(value).toLocaleString('en-US').replace('-', '−');
  if (size !== 0 && size < 1e-4) return value.toExponential(2).replace('-', '−');
  const text = String(Number(value.toPrecision(4)));
  return text.replace(/^-/, '−');
}
