const ALPHABET = 'ABCDEFGHIJKLMNOPQRSTUVWXYZabcdefghijklmnopqrstuvwxyz0123456789+/';

/** Bytes as base64 [RFC4648]; runs in Node and in a browser alike. */
export function toBase64(bytes: Uint8Array): string {
  const pieces: string[] = [];
  let piece = '';
  for (let i = 0; i < bytes.length; i += 3) {
    const [a, b, c] = [bytes[i]!, bytes[i + 1], bytes[i + 2]];
    piece += ALPHABET[a >> 2]! + ALPHABET[((a & 3) << 4) | ((b ?? 0) >> 4)]!;
    piece += b === undefined ? '=' : ALPHABET[((b & 15) << 2) | ((c ?? 0) >> 6)]!;
    piece += c === undefined ? '=' : ALPHABET[c & 63]!;
    if (piece.length > 30_000) {
      pieces.push(piece);
      piece = '';
    }
  }
  pieces.push(piece);
  return pieces.join('');
}

export function fromBase64(text: string): Uint8Array {
  const binary = atob(text);
  const bytes = new Uint8Array(binary.length);
  for (let i = 0; i < binary.length; i++) bytes[i] = binary.charCodeAt(i);
  return bytes;
}
