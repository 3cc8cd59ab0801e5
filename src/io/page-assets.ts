import { createHash } from 'node:crypto';
import { existsSync, readFileSync } from 'node:fs';
import { createRequire } from 'node:module';
import { GalewakeError } from '../errors.js';
import { PAGE_STYLE } from '../picture/page/style.js';
import type { PageAssets } from '../picture/page-html.js';

const require = createRequire(import.meta.url);
const sha256 = (text: string): string => createHash('sha256').update(text, 'utf8').digest('base64');

/** The page's script as the build bundled it, its style, and their hashes for the content-security policy. */
export function pageAssets(): PageAssets {
  const built = ['../picture/page/bundle.txt', '../../dist/picture/page/bundle.txt']
    .map((path) => new URL(path, import.meta.url))
    .find((url) => existsSync(url));
  if (!built)
    throw new GalewakeError(
      'page.bundle',
      'the script of the page is not built; run `npm run build`, or reinstall the package',
    );
  const script = readFileSync(built, 'utf8');
  return { script, scriptSha256: sha256(script), style: PAGE_STYLE, styleSha256: sha256(PAGE_STYLE) };
}

/** The coast of a page: Natural Earth 1:50 million as a TopoJSON document [NaturalEarth]. */
export function pageCoast(): string {
  return readFileSync(require.resolve('world-atlas/land-50m.json'), 'utf8');
}
