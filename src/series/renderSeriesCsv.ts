import type { Method } from '../method/method.js';
import type { Series } from './series.js';

/**
 * `series.csv`: one row per time point, columns as the contract's section 6 lays them down.
 *
 * @returns RFC 4180 text with CRLF; a text cell that a spreadsheet would take for a formula gets a leading apostrophe, a number stays
 *          a number, what is absent stays empty
 * @source RFC 4180
 */
export function renderSeriesCsv(series: Series, method: Method): string {
  const species = method.species.map(({ id }) => id);
  const head = [
    'file',
    'sha256',
    'acquired',
    'elapsed_s',
    'status',
    'conversion',
    'conversion_u',
    ...species.flatMap((id) => [`${id}_mole_fraction`, `${id}_mole_fraction_u`]),
    'flags',
  ];
  const rows = series.points.map((point) => {
    const amounts = point.status === 'set-aside' ? undefined : point.amounts;
    return [
      textCell(point.file),
      point.sha256,
      point.acquired,
      numberCell(point.elapsedS),
      point.status,
      numberCell(amounts?.conversion?.value),
      numberCell(amounts?.conversion?.u),
      ...species.flatMap((id) => [
        numberCell(amounts?.species[id]?.moleFraction),
        numberCell(amounts?.species[id]?.moleFractionU),
      ]),
      textCell([...new Set(point.flags.filter(({ weight }) => weight !== 'note').map(({ code }) => code))].join(' ')),
    ];
  });
  return [head.map(textCell), ...rows].map((row) => `${row.join(',')}\r\n`).join('');
}

function numberCell(value: number | undefined): string {
  return value !== undefined && Number.isFinite(value) ? JSON.stringify(value) : '';
}

/** Quotes where RFC 4180 asks for it; disarms what a spreadsheet would run. */
export function textCell(text: string): string {
  const safe = /^[=+\-@\t\r]/.test(text) ? `'${text}` : text;
  return /[",\r\n]/.test(safe) ? `"${safe.replaceAll('"', '""')}"` : safe;
}
