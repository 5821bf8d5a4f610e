import type { ReportInput } from '../reportInput.js';
import type { Section } from '../reportModel.js';

/** How to verify, the blank signature block, cautions. */
export function cautionsSection({ head, series }: ReportInput): Section {
  return {
    id: 'verify',
    heading: 'How to verify, signatures and cautions',
    blocks: [
      {
        kind: 'text',
        text: `Ledger head of this report: entry ${head.seq}, ${head.hash}. Any copy of the run folder is checked, and every number recomputed from the captured raw files, by:`,
      },
      { kind: 'code', text: `kinetrail verify <output folder>/${series.run} --head ${head.hash}` },
      { kind: 'text', text: 'series.json and ledger.jsonl are attached to the PDF.' },
      {
        kind: 'table',
        caption: 'Signatures, by the procedure of the site; left blank by the program',
        columns: [
          { head: 'meaning', align: 'left', weight: 2 },
          { head: 'name', align: 'left', weight: 3 },
          { head: 'signature', align: 'left', weight: 3 },
          { head: 'date', align: 'left', weight: 2 },
        ],
        rows: [
          ['measured by', '', '', ''],
          ['reviewed by', '', '', ''],
        ],
      },
      {
        kind: 'list',
        items: [
          'These numbers support, and do not replace, the judgement of a qualified chemist and the released procedures of the site.',
          'Residual-solvent limits are those of ICH Q3C, option 1; local regulation may differ.',
          'An unattended reaction needs safety controls of its own; no alarm or message of this program is a safety function.',
          'Uncertainties are standard uncertainties (k = 1) unless a coverage factor is stated.',
        ],
      },
    ],
  };
}
