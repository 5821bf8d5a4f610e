import { formatTime } from '../formatNumber.js';
import type { ReportInput } from '../reportInput.js';
import type { Block, Section } from '../reportModel.js';

/** Changes since first entry (also when there are none), exceptions, counts in and out, every file with its full hash. */
export function changesSection({ series, changes, exceptions, files }: ReportInput): Section {
  const blocks: Block[] = [];
  if (changes.length === 0) blocks.push({ kind: 'text', text: 'Changes since first entry: none.' });
  else {
    const columns = [
      { head: 'when', align: 'left' as const, weight: 2 },
      { head: 'change', align: 'left' as const, weight: 1.8 },
      { head: 'of', align: 'left' as const, weight: 2.4 },
      { head: 'by', align: 'left' as const, weight: 1.2 },
      { head: 'because', align: 'left' as const, weight: 3.4 },
    ];
    blocks.push({
      kind: 'table',
      caption: 'Changes since first entry',
      columns,
      rows: changes.map(({ at, kind, what, by, because }) => [formatTime(at), kind, what, by, because]),
      small: true,
    });
  }
  if (exceptions.length === 0) blocks.push({ kind: 'text', text: 'Exceptions: none.' });
  else {
    const columns = [
      { head: 'when', align: 'left' as const, weight: 2 },
      { head: 'kind', align: 'left' as const, weight: 1.4 },
      { head: 'what', align: 'left' as const, weight: 6 },
    ];
    blocks.push({
      kind: 'table',
      caption: 'Exceptions: late, replaced, vanished, duplicate, outages',
      columns,
      rows: exceptions.map(({ at, kind, message }) => [formatTime(at), kind, message]),
      small: true,
    });
  }
  const used = series.points.filter(({ status }) => status !== 'set-aside').length;
  blocks.push({
    kind: 'text',
    text: `Counts: ${files.length} contents seen; ${series.points.length} time points (${used} used, ${series.points.length - used} set aside) and ${series.inputs.length} other inputs.`,
  });
  const columns = [
    { head: 'file', align: 'left' as const, weight: 2.4 },
    { head: 'state', align: 'left' as const, weight: 1.2 },
    { head: 'SHA-256', align: 'left' as const, weight: 6 },
  ];
  blocks.push({
    kind: 'table',
    caption: 'All files',
    columns,
    rows: files.map(({ file, state, sha256 }) => [file, state, sha256]),
    small: true,
  });
  return { id: 'changes', heading: 'Changes, exceptions and files', blocks };
}
