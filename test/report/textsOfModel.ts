import type { Block, ReportModel } from '../../src/report/reportModel.js';

/** Every sentence, and every row of every table as one text, that a report model holds; drawings left out. */
export function textsOfModel(model: ReportModel): string[] {
  return [
    model.title,
    model.reportId,
    ...model.identity.flat(),
    ...model.highlights.flatMap(({ label, value, detail }) => [label, value, detail]),
    ...model.verdict,
    ...model.sections.flatMap(({ heading, blocks }) => [heading, ...blocks.flatMap(textsOfBlock)]),
  ].filter((text) => text !== '');
}

function textsOfBlock(block: Block): string[] {
  switch (block.kind) {
    case 'text':
    case 'subheading':
      return [block.text];
    case 'code':
      return block.text.split('\n');
    case 'list':
      return [...block.items];
    case 'facts':
      return block.facts.flat();
    case 'figure':
      return [`${block.title}. ${block.description}`];
    case 'table':
      return [block.caption, ...block.columns.map(({ head }) => head), ...block.rows.map((row) => row.join(' '))];
  }
}
