/**
 * @typedef {{name: string, value: number, unit: string, goal: number | null, baseline: number | null, ratio: number | null}} Row
 */

const HEADS = ['bench', 'value', 'goal', 'baseline', 'ratio'];

/** @param {Row[]} rows @returns {string} the results as a table of text */
export function tableOf(rows) {
  const cells = rows.map((row) => [
    row.name,
    `${figure(row.value)} ${row.unit}`,
    figure(row.goal),
    figure(row.baseline),
    figure(row.ratio),
  ]);
  const lines = [HEADS, ...cells];
  const widths = HEADS.map((_, column) => Math.max(...lines.map((line) => line[column]?.length ?? 0)));
  return lines
    .map((line) =>
      line
        .map((cell, column) => cell.padEnd(widths[column] ?? 0))
        .join('  ')
        .trimEnd(),
    )
    .join('\n');
}

/** @param {number | null} value */
function figure(value) {
  return value === null ? '-' : String(Number(value.toPrecision(4)));
}
