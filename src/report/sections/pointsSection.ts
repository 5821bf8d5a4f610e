import { formatElapsed, formatU, formatValue, significant } from '../formatNumber.js';
import type { ReportInput } from '../reportInput.js';
import type { Section } from '../reportModel.js';

/** One row a time point. */
export function pointsSection({ series, method }: ReportInput): Section {
  const species = method.species
    .filter(({ id }) => series.points.some(({ amounts }) => amounts?.species[id]?.moleFraction !== undefined))
    .slice(0, 5);
  const columns = [
    { head: 'file', align: 'left' as const, weight: 2.4 },
    { head: 'elapsed', align: 'right' as const, weight: 1.9 },
    { head: 'conversion', align: 'right' as const, weight: 1.9 },
    { head: 'u', align: 'right' as const, weight: 1.5 },
    ...species.map(({ name, id }) => ({ head: `x(${name.length > 14 ? id : name})`, align: 'right' as const, weight: 1.6 })),
    { head: 'S/N', align: 'right' as const, weight: 1.2 },
    { head: 'drift / ppm', align: 'right' as const, weight: 1.5 },
    { head: 'status and flags', align: 'left' as const, weight: 3.2 },
    { head: 'SHA-256', align: 'left' as const, weight: 2.2 },
  ];
  const rows = series.points.map((point) => {
    const amounts = point.status === 'set-aside' ? undefined : point.amounts;
    const codes = [...new Set(point.flags.filter(({ weight }) => weight !== 'note').map(({ code }) => code))];
    return [
      point.block !== undefined ? `${point.file}, block ${point.block}` : point.file,
      formatElapsed(point.elapsedS),
      amounts?.conversion ? formatValue(amounts.conversion.value, amounts.conversion.u) : '\u2013',
      amounts?.conversion ? formatU(amounts.conversion.u) : '\u2013',
      ...species.map(({ id }) => {
        const entry = amounts?.species[id];
        return entry?.moleFraction !== undefined ? formatValue(entry.moleFraction, entry.moleFractionU) : '\u2013';
      }),
      point.record.quality ? significant(point.record.quality.signalToNoise, 3) : '\u2013',
      point.record.reference ? formatValue(point.record.reference.movedPpm, 0.001) : '\u2013',
      [point.status, ...codes].join(', '),
      point.sha256.slice(0, 10),
    ];
  });
  const flagged = series.points.flatMap((point) =>
    point.flags.filter(({ weight }) => weight !== 'note').map(({ code, message }) => `${point.file}: ${message} (${code})`),
  );
  const inputs = series.inputs.map(
    ({ file, status, flags }) => `${file}: ${status}; ${flags.map(({ message }) => message).join('; ')}`,
  );
  return {
    id: 'points',
    heading: 'Time points',
    blocks: [
      rows.length > 0
        ? {
            kind: 'table',
            caption: 'Time points by time of acquisition; a dash where nothing is stated',
            columns,
            rows,
            small: true,
          }
        : { kind: 'text', text: 'No time point could be read.' },
      ...(flagged.length > 0
        ? [
            { kind: 'text' as const, text: 'Flags in full:' },
            { kind: 'list' as const, items: clip(flagged) },
          ]
        : [{ kind: 'text' as const, text: 'No flags.' }]),
      ...(inputs.length > 0
        ? [
            { kind: 'text' as const, text: 'Files that are not time points:' },
            { kind: 'list' as const, items: clip(inputs) },
          ]
        : []),
    ],
  };
}

const itemsMax = 120;

function clip(items: readonly string[]): string[] {
  return items.length <= itemsMax
    ? [...items]
    : [...items.slice(0, itemsMax), `and ${items.length - itemsMax} more, in series.json`];
}
