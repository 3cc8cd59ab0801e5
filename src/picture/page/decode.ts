import { feature } from 'topojson-client';
import { fromBase64 } from '../base64.js';
import type { Coast } from '../map-svg.js';
import { type PageFacts, type PageFields, unpackFields } from '../page-data.js';

async function inflated(id: string): Promise<Uint8Array | null> {
  const text = document.getElementById(id)?.textContent ?? '';
  if (text === '') return null;
  const bytes = fromBase64(text) as Uint8Array<ArrayBuffer>;
  const stream = new Blob([bytes]).stream().pipeThrough(new DecompressionStream('deflate'));
  return new Uint8Array(await new Response(stream).arrayBuffer());
}

/** What the page carries. */
export async function pageContent(): Promise<{ facts: PageFacts; fields: PageFields; coast: Coast | null }> {
  const [factBytes, fieldBytes, coastBytes] = await Promise.all([
    inflated('facts'),
    inflated('fields'),
    inflated('coast'),
  ]);
  const facts = JSON.parse(new TextDecoder().decode(factBytes!)) as PageFacts;
  let coast: Coast | null = null;
  if (coastBytes) {
    const document = JSON.parse(new TextDecoder().decode(coastBytes));
    coast =
      document.type === 'Topology'
        ? (feature(document, document.objects.land) as unknown as Coast)
        : (document as Coast);
  }
  return { facts, fields: unpackFields(fieldBytes!, facts.grid), coast };
}
