import { FONT_FAMILY } from './text.js';

/** Attributes of an element; those that are undefined are left out. */
export type Attributes = Readonly<Record<string, string | number | undefined>>;

/** Text as it stands in XML: markup characters escaped, and what XML 1.0 cannot hold left out. */
export function escapeXml(text: string): string {
  return text
    .replace(/[^\t\n\r\u0020-\uD7FF\uE000-\uFFFD\u{10000}-\u{10FFFF}]/gu, '')
    .replace(/[&<>"']/g, (character) => `&#${character.charCodeAt(0)};`);
}

/** A coordinate with at most two decimals. */
export function coordinate(value: number): string {
  return String(Math.round(value * 100) / 100 + 0);
}

/** An element; `content` is markup already. */
export function element(name: string, attributes: Attributes, content = ''): string {
  let out = `<${name}`;
  for (const [key, value] of Object.entries(attributes)) {
    if (value === undefined) continue;
    out += ` ${key}="${typeof value === 'number' ? coordinate(value) : escapeXml(value)}"`;
  }
  return content === '' ? `${out}/>` : `${out}>${content}</${name}>`;
}

/** A line of text. `halo` draws its outline beneath it in that colour. */
export function textAt(
  text: string,
  options: {
    readonly x: number;
    readonly y: number;
    readonly size: number;
    readonly fill: string;
    readonly bold?: boolean;
    readonly anchor?: 'start' | 'middle' | 'end';
    readonly halo?: string;
    readonly class?: string;
  },
): string {
  return element(
    'text',
    {
      class: options.class,
      x: options.x,
      y: options.y,
      'font-size': options.size,
      'font-weight': options.bold ? 600 : undefined,
      'text-anchor': options.anchor === 'start' ? undefined : options.anchor,
      fill: options.fill,
      ...(options.halo
        ? {
            stroke: options.halo,
            'stroke-width': options.size * 0.22,
            'stroke-linejoin': 'round',
            'paint-order': 'stroke',
          }
        : {}),
    },
    escapeXml(text),
  );
}

/** A whole SVG document with a title and a description for readers who do not see it. */
export function svgDocument(
  parts: { readonly width: number; readonly height: number; readonly title: string; readonly description: string },
  content: string,
): string {
  const { width, height } = parts;
  return `${element(
    'svg',
    {
      xmlns: 'http://www.w3.org/2000/svg',
      viewBox: `0 0 ${coordinate(width)} ${coordinate(height)}`,
      width,
      height,
      role: 'img',
      'aria-labelledby': 'title description',
      'font-family': FONT_FAMILY,
    },
    `${element('title', { id: 'title' }, escapeXml(parts.title))}${element('desc', { id: 'description' }, escapeXml(parts.description))}\n${content}`,
  )}\n`;
}
