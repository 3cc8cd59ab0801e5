/**
 * Widths of the shipped font in thousandths of its size: characters 32–126, and the mean of the Latin letters beyond.
 * Pictures are laid out by them, so that a layout needs no font file and is the same everywhere.
 */
const REGULAR = {
  ascii: [
    200, 289, 426, 497, 497, 824, 609, 249, 303, 303, 418, 497, 249, 311, 249, 350, 497, 497, 497, 497, 497, 497, 497,
    497, 497, 497, 249, 249, 497, 497, 497, 425, 847, 543, 588, 571, 615, 527, 494, 617, 652, 263, 479, 579, 486, 727,
    647, 664, 566, 664, 569, 534, 536, 645, 515, 786, 513, 476, 539, 303, 350, 303, 497, 500, 542, 504, 553, 456, 555,
    496, 292, 504, 544, 246, 247, 495, 255, 829, 547, 542, 555, 555, 347, 419, 338, 544, 467, 719, 446, 467, 425, 303,
    241, 303, 497,
  ],
  other: 560,
};
const SEMIBOLD = {
  ascii: [
    200, 315, 482, 513, 513, 841, 639, 275, 324, 324, 438, 513, 275, 322, 275, 344, 513, 513, 513, 513, 513, 513, 513,
    513, 513, 513, 275, 275, 513, 513, 513, 444, 875, 558, 597, 576, 625, 538, 510, 628, 663, 282, 494, 597, 502, 745,
    657, 674, 582, 674, 592, 545, 546, 655, 536, 800, 541, 501, 540, 324, 344, 324, 513, 500, 549, 516, 563, 462, 564,
    507, 317, 520, 558, 262, 263, 522, 271, 843, 560, 549, 564, 564, 373, 431, 361, 556, 495, 748, 481, 495, 443, 324,
    255, 324, 513,
  ],
  other: 580,
};
const SIGNS: Readonly<Record<string, number>> = {
  '°': 340,
  '·': 262,
  '–': 480,
  '×': 500,
  '±': 500,
  '≥': 500,
  '′': 250,
};

/** The font that ships with the package, and what stands in for it. */
export const FONT_FAMILY =
  "'Source Sans 3', 'Source Sans Pro', 'Segoe UI', Roboto, 'Helvetica Neue', Arial, sans-serif";

/** How a piece of text is set. */
export interface TextStyle {
  readonly size: number;
  readonly bold?: boolean;
}

/** Width of a text, in the unit of its size. East Asian characters are as wide as high. */
export function textWidth(text: string, { size, bold = false }: TextStyle): number {
  const widths = bold ? SEMIBOLD : REGULAR;
  let thousandths = 0;
  for (const character of text) {
    const code = character.codePointAt(0)!;
    thousandths += SIGNS[character] ?? widths.ascii[code - 32] ?? (code >= 0x1100 ? 1000 : widths.other);
  }
  return (thousandths * size) / 1000;
}

/** A text broken into lines no wider than `width`, between words; a single longer word is cut with an ellipsis. */
export function wrapText(text: string, { width, ...style }: TextStyle & { readonly width: number }): string[] {
  const lines: string[] = [];
  let line = '';
  for (const word of text.split(/\s+/).filter(Boolean)) {
    const longer = line === '' ? word : `${line} ${word}`;
    if (textWidth(longer, style) <= width) {
      line = longer;
      continue;
    }
    if (line !== '') lines.push(line);
    line = cutText(word, { width, ...style });
  }
  if (line !== '') lines.push(line);
  return lines;
}

/** A text cut with an ellipsis where it is wider than `width`. */
export function cutText(text: string, { width, ...style }: TextStyle & { readonly width: number }): string {
  if (textWidth(text, style) <= width) return text;
  const characters = [...text];
  while (characters.length > 1 && textWidth(`${characters.join('')}…`, style) > width) characters.pop();
  return `${characters.join('')}…`;
}
