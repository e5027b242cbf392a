/**
 * Cure age in equivalent days over the cells [from, to), computed by a plain loop from the stated formulas, without any of
 * the product's cure code: rate exp[−(E/R)(1/T − 1/294.15)] capped at a temperature; a silence of up to three hours is a
 * straight line between its neighbours, a longer one the median of the same UTC hour over the 14 days before it.
 * @param course temperature of a cell, null for silence; @param energy kJ/mol
 */
export function cureDaysByHand(
  course: (cell: number) => number | null,
  cells: { readonly begin: number; readonly from: number; readonly to: number },
  energy: number,
  capCelsius: number,
): number {
  let days = 0;
  for (let cell = cells.from; cell < cells.to; cell++) {
    const celsius = course(cell) ?? filled(course, cell, cells.begin);
    const kelvin = Math.min(celsius, capCelsius) + 273.15;
    days += Math.exp(-((energy * 1000) / 8.314462618) * (1 / kelvin - 1 / 294.15)) / 144;
  }
  return days;
}

function filled(course: (cell: number) => number | null, cell: number, begin: number): number {
  let first = cell;
  while (course(first - 1) === null) first--;
  let after = cell;
  while (course(after) === null) after++;
  const [left, right] = [course(first - 1) ?? Number.NaN, course(after) ?? Number.NaN];
  if (after - first <= 18) return left + ((right - left) * (cell - first + 1)) / (after - first + 1);
  const sameHour: number[] = [];
  for (let past = Math.max(begin, first - 14 * 144); past < first; past++) {
    const celsius = course(past);
    if (celsius !== null && Math.floor(past / 6) % 24 === Math.floor(cell / 6) % 24) sameHour.push(celsius);
  }
  sameHour.sort((a, b) => a - b);
  const middle = sameHour.length >> 1;
  return sameHour.length % 2 === 1
    ? (sameHour[middle] ?? Number.NaN)
    : ((sameHour[middle - 1] ?? Number.NaN) + (sameHour[middle] ?? Number.NaN)) / 2;
}
