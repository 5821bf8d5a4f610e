import { existsSync } from 'node:fs';
import { readdir, readFile } from 'node:fs/promises';
import { join } from 'node:path';
import { alignColumns } from './alignColumns.js';
import { plainQuantity } from './plainNumber.js';

/** The few keys of `series.json` that the table shows. */
interface SeriesFile {
  readonly run: string;
  readonly points: readonly {
    readonly status: string;
    readonly conversion?: { readonly value: number; readonly u: number };
    readonly flags: readonly unknown[];
  }[];
  readonly inputs: readonly unknown[];
}

/** Run, points, conversion, flags, report path: one row a run of the output folder. */
export async function demoTable(out: string): Promise<string> {
  const names = (await readdir(out, { withFileTypes: true })).filter((entry) => entry.isDirectory()).map(({ name }) => name);
  const rows: string[][] = [];
  for (const name of names.sort()) {
    const file = join(out, name, 'series.json');
    if (!existsSync(file)) continue;
    const series = JSON.parse(await readFile(file, 'utf8')) as SeriesFile;
    const last = series.points.findLast(({ conversion }) => conversion !== undefined)?.conversion;
    const flagged = series.points.filter(({ status }) => status === 'flagged').length;
    const aside = series.points.filter(({ status }) => status === 'set-aside').length + series.inputs.length;
    rows.push([
      series.run,
      String(series.points.length),
      last ? plainQuantity(last.value, last.u) : 'none stated',
      `${flagged} flagged, ${aside} set aside`,
      join(out, name, 'report.html'),
    ]);
  }
  const table = alignColumns([['run', 'points', 'conversion (u)', 'flags', 'report'], ...rows], [1]);
  return `\n${table.join('\n')}\n\n  All runs at a glance: ${join(out, 'index.html')}\n`;
}
