import { significant } from '../formatNumber.js';
import type { ReportInput } from '../reportInput.js';
import type { Block, Section } from '../reportModel.js';

/** The method as used, and what processing did at the first and the last point. */
export function methodSection({ series, method, methodText }: ReportInput): Section {
  const blocks: Block[] = [
    {
      kind: 'facts',
      facts: [
        ['Method', `${method.title}, version ${method.version}`],
        ['SHA-256 of the method file', method.sha256],
        ['Nucleus', method.nucleus],
        ['Solvent', method.solvent ?? 'none stated'],
        ['Reference', method.reference.signal],
      ],
    },
    { kind: 'code', text: methodText.trimEnd() },
  ];
  const measured = series.points.filter(({ record }) => record.steps.length > 0);
  const shown = [...new Set([measured[0], measured.at(-1)].filter((point) => point !== undefined))];
  for (const { file, record } of shown) {
    const rows = record.steps.map(({ step, parameters }) => [
      step,
      Object.entries(parameters)
        .map(([key, value]) => `${key.replaceAll('_', ' ')} ${shownValue(value)}`)
        .join('; '),
    ]);
    blocks.push({
      kind: 'table',
      caption: `Processing of ${file}`,
      columns: [
        { head: 'step', align: 'left', weight: 1.4 },
        { head: 'parameters', align: 'left', weight: 6 },
      ],
      rows,
      small: true,
    });
  }
  blocks.push({
    kind: 'text',
    tone: 'note',
    text: 'Every parameter of every point stands in its record (points/) and is recomputed by verify.',
  });
  return { id: 'method', heading: 'Method as used', blocks };
}

function shownValue(value: unknown): string {
  if (typeof value === 'number') return Number.isInteger(value) ? String(value) : significant(value, 5);
  if (typeof value === 'boolean') return value ? 'yes' : 'no';
  if (Array.isArray(value)) return value.map(shownValue).join(' ');
  return String(value);
}
