import { sha256Hex } from './input.js';

/** Longest name before its hash, characters. */
const LONGEST = 64;
/** Names that Windows keeps for devices, with any extension. */
const DEVICE = /^(con|prn|aux|nul|conin\$|conout\$|(com|lpt)[0-9\u00B9\u00B2\u00B3])(\..*)?$/i;

/**
 * The name of a file or folder for a storm, whatever its id holds: letters, digits, `.`, `_` and `-` of ASCII, not
 * hidden, no device of Windows, at most 73 characters. An id that is such a name already stays as it is; any other gets
 * eight digits of its SHA-256 at the end, so that two ids never share a name by accident.
 */
export function safeName(id: string): string {
  const plain = id
    .normalize('NFKD')
    .replace(/\p{M}+/gu, '')
    .replace(/[^A-Za-z0-9._-]+/g, '-')
    .replace(/\.{2,}/g, '.')
    .slice(0, LONGEST)
    .replace(/^[.-]+|[.-]+$/g, '');
  const name = plain === '' ? 'storm' : DEVICE.test(plain) ? `storm-${plain}` : plain;
  return name === id ? id : `${name}-${sha256Hex(id).slice(0, 8)}`;
}
