const ENTITIES: Readonly<Record<string, string>> = {
  '&': '&amp;',
  '<': '&lt;',
  '>': '&gt;',
  '"': '&quot;',
  "'": '&apos;',
};
/** Characters that XML 1.0 forbids even when escaped (section 2.2), among them halves of a surrogate pair. */
const FORBIDDEN =
  /[\u0000-\u0008\u000B\u000C\u000E-\u001F\uFFFE\uFFFF]|[\uD800-\uDBFF](?![\uDC00-\uDFFF])|(?<![\uD800-\uDBFF])[\uDC00-\uDFFF]/g;

/** Text as the content or the attribute value of an XML 1.0 element; what XML cannot hold becomes U+FFFD. */
export function xmlText(text: string): string {
  return text.replace(FORBIDDEN, '\uFFFD').replace(/[&<>"']/g, (character) => ENTITIES[character]!);
}

/** The same in plain ASCII: everything above U+007E as a numeric reference. */
export function xmlAscii(text: string): string {
  return xmlText(text).replace(/[^\x09\x0A\x0D\x20-\x7E]/gu, (character) => `&#${character.codePointAt(0)};`);
}
