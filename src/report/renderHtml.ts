import { createHash } from 'node:crypto';
import { escapeMarkup } from './escapeMarkup.js';
import { formatTime } from './formatNumber.js';
import type { Block, ReportModel, Section } from './reportModel.js';

/**
 * Draws the model as one self-contained page: no script, no outside reference, a policy that forbids both.
 *
 * @param css the style sheet; its hash stands in the content security policy
 */
export function renderHtml(model: ReportModel, css: string): string {
  const style = css.replaceAll('</', '<\\/');
  const hash = createHash('sha256').update(style).digest('base64');
  const kind = model.isFinal ? 'Final report' : '<span class="interim">Interim report</span>';
  return `<!doctype html>
<html lang="en">
<head>
<meta charset="utf-8">
<meta http-equiv="Content-Security-Policy" content="default-src 'none'; style-src 'sha256-${hash}'; img-src data:; base-uri 'none'; form-action 'none'">
<meta name="viewport" content="width=device-width, initial-scale=1">
<title>${escapeMarkup(model.title)}</title>
<style>${style}</style>
</head>
<body>
<a class="skip" href="#main">Skip to the report</a>
<header>
<p class="kicker">${kind} ${escapeMarkup(model.reportId)} &#183; ${escapeMarkup(formatTime(model.createdUtc))}</p>
<h1>${escapeMarkup(model.title)}</h1>
<section class="verdict" aria-label="Verdict">
${model.verdict.map((sentence) => `<p>${escapeMarkup(sentence)}</p>`).join('\n')}
</section>
<dl>${model.identity.map(([label, value]) => `<dt>${escapeMarkup(label)}</dt><dd>${escapeMarkup(value)}</dd>`).join('')}</dl>
<nav aria-label="Sections"><ul>${model.sections.map(({ id, heading }) => `<li><a href="#${id}">${escapeMarkup(heading)}</a></li>`).join('')}</ul></nav>
</header>
<main id="main">
${model.sections.map(sectionHtml).join('\n')}
</main>
<footer><p>kinetrail ${escapeMarkup(model.program)}; report ${escapeMarkup(model.reportId)}</p></footer>
</body>
</html>
`;
}

function sectionHtml({ id, heading, blocks }: Section): string {
  const parts: string[] = [];
  let gallery: string[] = [];
  const close = () => {
    if (gallery.length > 0) parts.push(`<div class="figures">${gallery.join('')}</div>`);
    gallery = [];
  };
  for (const block of blocks) {
    if (block.kind === 'figure' && block.half) gallery.push(blockHtml(block));
    else {
      close();
      parts.push(blockHtml(block));
    }
  }
  close();
  return `<section id="${id}" aria-labelledby="${id}-h"><h2 id="${id}-h">${escapeMarkup(heading)}</h2>\n${parts.join('\n')}\n</section>`;
}

function blockHtml(block: Block): string {
  switch (block.kind) {
    case 'text':
      return `<p${block.tone === 'note' ? ' class="note"' : ''}>${escapeMarkup(block.text)}</p>`;
    case 'list':
      return `<ul>${block.items.map((item) => `<li>${escapeMarkup(item)}</li>`).join('')}</ul>`;
    case 'facts':
      return `<dl>${block.facts.map(([label, value]) => `<dt>${escapeMarkup(label)}</dt><dd>${escapeMarkup(value)}</dd>`).join('')}</dl>`;
    case 'code':
      return `<pre tabindex="0">${escapeMarkupLong(block.text)}</pre>`;
    case 'figure':
      return `<figure>${block.svg}<figcaption><strong>${escapeMarkup(block.title)}.</strong> ${escapeMarkup(block.description)}</figcaption></figure>`;
    case 'table':
      return tableHtml(block);
  }
}

function tableHtml({ caption, columns, rows, small }: Extract<Block, { kind: 'table' }>): string {
  const side = (index: number) => (columns[index]?.align === 'right' ? ' class="r"' : '');
  const head = columns.map((column, index) => `<th scope="col"${side(index)}>${escapeMarkup(column.head)}</th>`).join('');
  const body = rows
    .map(
      (row) =>
        `<tr>${row.map((cell, index) => (index === 0 ? `<th scope="row">${escapeMarkup(cell)}</th>` : `<td${side(index)}>${escapeMarkup(cell)}</td>`)).join('')}</tr>`,
    )
    .join('\n');
  return `<div class="scroll" tabindex="0" role="region" aria-label="${escapeMarkup(caption)}"><table${small ? ' class="small"' : ''}><caption>${escapeMarkup(caption)}</caption><thead><tr>${head}</tr></thead><tbody>${body}</tbody></table></div>`;
}

/** A method file may be longer than what one cell is clipped to. */
function escapeMarkupLong(text: string): string {
  return text.split('\n').map(escapeMarkup).join('\n');
}
