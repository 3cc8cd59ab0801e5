import { createRequire } from 'node:module';
import { Resvg } from '@resvg/resvg-js';

const require = createRequire(import.meta.url);

/** The font that ships with the package: regular and semi-bold. */
export function fontFiles(): string[] {
  return ['400Regular/SourceSans3_400Regular.ttf', '600SemiBold/SourceSans3_600SemiBold.ttf'].map((file) =>
    require.resolve(`@expo-google-fonts/source-sans-3/${file}`),
  );
}

/**
 * A picture of ours as PNG, with the shipped font and no other, so that it is the same on every machine.
 * @param width in pixels; the height follows
 */
export function svgToPng(svg: string, { width = 1800 }: { readonly width?: number } = {}): Uint8Array {
  const picture = new Resvg(svg, {
    fitTo: { mode: 'width', value: width },
    font: {
      fontFiles: fontFiles(),
      loadSystemFonts: false,
      defaultFontFamily: 'Source Sans 3',
      sansSerifFamily: 'Source Sans 3',
    },
  });
  return picture.render().asPng();
}
