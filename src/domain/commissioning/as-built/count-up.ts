/**
 * So many names alike: the last number in a name counted up (B1 → B1, B2, B3; Row 09 → Row 09, Row 10). A name without
 * one gets it behind a blank from the second on.
 */
export function countUp(name: string, count: number): string[] {
  const found = /^(.*?)(\d+)(\D*)$/.exec(name);
  if (!found) return Array.from({ length: count }, (_, i) => (i === 0 ? name : `${name} ${i + 1}`));
  const [, head = '', digits = '', tail = ''] = found;
  return Array.from(
    { length: count },
    (_, i) => `${head}${String(Number(digits) + i).padStart(digits.length, '0')}${tail}`,
  );
}
