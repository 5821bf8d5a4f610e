import { escapeForTerminal } from './terminalText.js';

/**
 * Sets a table in plain text: a head row, then rows, columns two blanks apart, indented by two.
 *
 * @param rows  shape (rows, columns); the first row is the head
 * @param right columns that are set flush right
 */
export function alignColumns(rows: readonly (readonly string[])[], right: readonly number[]): string[] {
  const shown = rows.map((row) => row.map(escapeForTerminal));
  const widths = (shown[0] ?? []).map((_, column) => Math.max(...shown.map((row) => (row[column] ?? '').length)));
  return shown.map((row) => {
    const cells = row.map((cell, column) =>
      right.includes(column) ? cell.padStart(widths[column] ?? 0) : cell.padEnd(widths[column] ?? 0),
    );
    return `  ${cells.join('  ')}`.trimEnd();
  });
}
