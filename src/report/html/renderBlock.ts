import { decimalPads } from '../decimalPads.js';
import { escapeMarkup } from '../escapeMarkup.js';
import type { Block } from '../reportModel.js';

type TableBlock = Extract<Block, { kind: 'table' }>;
type FigureBlock = Extract<Block, { kind: 'figure' }>;

/** One block of the report as HTML. */
export function renderBlock(block: Block): string {
  switch (block.kind) {
    case 'text':
      return `<p${block.tone ? ` class="${block.tone}"` : ''}>${escapeMarkup(block.text)}</p>`;
    case 'subheading':
      return `<h3>${escapeMarkup(block.text)}</h3>`;
    case 'list':
      return `<ul>${block.items.map((item) => `<li>${escapeMarkup(item)}</li>`).join('')}</ul>`;
    case 'facts':
      return `<dl>${block.facts.map(([label, value]) => `<div><dt>${escapeMarkup(label)}</dt><dd>${escapeMarkup(value)}</dd></div>`).join('')}</dl>`;
    case 'code':
      return `<pre tabindex="0">${escapeMarkup(block.text)}</pre>`;
    case 'table':
      return renderTable(block);
    case 'figure':
      return renderFigure(block);
  }
}

/** Small figures that follow each other stand side by side. */
export function renderBlocks(blocks: readonly Block[]): string {
  const parts: string[] = [];
  let columns = 1;
  for (const block of blocks) {
    const own = block.kind === 'figure' ? (block.perRow ?? 1) : 1;
    if (own !== columns) parts.push(columns > 1 ? '</div>' : '', own > 1 ? `<div class="grid of${own}">` : '');
    columns = own;
    parts.push(renderBlock(block));
  }
  if (columns > 1) parts.push('</div>');
  return parts.join('\n');
}

function renderTable({ caption, columns, rows, small }: TableBlock): string {
  const pads = columns.map(({ align }, index) =>
    align === 'right' ? decimalPads(rows.map((row) => row[index] ?? '')) : undefined,
  );
  const head = columns
    .map(({ head, align }) => `<th scope="col"${align === 'right' ? ' class="r"' : ''}>${escapeMarkup(head)}</th>`)
    .join('');
  const body = rows
    .map((row, rowIndex) => {
      const cells = columns.map(({ align }, index) => {
        const pad = Math.round(2 * (pads[index]?.[rowIndex] ?? 0));
        const classes = [align === 'right' ? 'r' : '', pad > 0 ? `p${Math.min(pad, 24)}` : ''].filter(Boolean).join(' ');
        const name = classes ? ` class="${classes}"` : '';
        const text = escapeMarkup(row[index] ?? '');
        return index === 0 ? `<th scope="row"${name}>${text}</th>` : `<td${name}>${text}</td>`;
      });
      return `<tr>${cells.join('')}</tr>`;
    })
    .join('\n');
  const name = escapeMarkup(caption);
  return `<div class="scroll" role="region" aria-label="${name}" tabindex="0"><table${small ? ' class="small"' : ''}><caption>${name}</caption><thead><tr>${head}</tr></thead><tbody>${body}</tbody></table></div>`;
}

function renderFigure({ title, description, svg, numbers, perRow }: FigureBlock): string {
  const details = numbers ? `<details><summary>Numbers of this chart</summary>${renderTable(numbers)}</details>` : '';
  return `<figure${perRow ? ' class="beside"' : ''}><div class="drawing">${svg}</div><figcaption><strong>${escapeMarkup(title)}.</strong> ${escapeMarkup(description)}</figcaption>${details}</figure>`;
}
