import { CAUTION } from '../write/provenance.js';
import { PAPER } from './colours.js';
import { element, svgDocument, textAt } from './svg.js';
import { cutText, wrapText } from './text.js';

/** What every drawing has around its content: heading above, notes and the caution below. */
export function sheet(options: {
  readonly width: number;
  readonly side: number;
  readonly title: string;
  readonly subtitle: string;
  readonly notes: readonly string[];
  /** content from `y` on; says where it ends */
  readonly content: (y: number) => { readonly svg: string; readonly bottom: number };
}): string {
  const { width, side, title, subtitle } = options;
  const inner = width - 2 * side;
  const subtitleLines = wrapText(subtitle, { size: 16, width: inner });
  const parts = [
    textAt(cutText(title, { size: 30, bold: true, width: inner }), {
      x: side,
      y: 44,
      size: 30,
      bold: true,
      fill: PAPER.ink,
      class: 'title',
    }),
    ...subtitleLines.map((line, i) => textAt(line, { x: side, y: 68 + i * 21, size: 16, fill: PAPER.quiet })),
  ];
  const { svg, bottom } = options.content(68 + subtitleLines.length * 21);
  parts.push(svg);
  let y = bottom + 14;
  for (const [i, note] of [CAUTION, ...options.notes].entries()) {
    for (const line of wrapText(note, { size: 14, bold: i === 0, width: inner })) {
      parts.push(textAt(line, { x: side, y, size: 14, bold: i === 0, fill: i === 0 ? PAPER.ink : PAPER.quiet }));
      y += 18.5;
    }
    y += 4;
  }
  const height = Math.ceil(y + 8);
  return svgDocument(
    { width, height, title, description: `${subtitle} ${CAUTION}` },
    [element('rect', { width, height, fill: PAPER.sheet }), ...parts].join('\n'),
  );
}
