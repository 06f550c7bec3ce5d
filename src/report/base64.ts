const LETTERS = 'ABCDEFGHIJKLMNOPQRSTUVWXYZabcdefghijklmnopqrstuvwxyz0123456789+/';

/** Base64 with padding (RFC 4648, section 4). */
export function base64(bytes: Uint8Array): string {
  let text = '';
  for (let i = 0; i < bytes.length; i += 3) {
    const left = bytes.length - i;
    const word = (bytes[i]! << 16) | ((bytes[i + 1] ?? 0) << 8) | (bytes[i + 2] ?? 0);
    text += LETTERS[word >> 18]! + LETTERS[(word >> 12) & 63]!;
    text += left > 1 ? LETTERS[(word >> 6) & 63]! : '=';
    text += left > 2 ? LETTERS[word & 63]! : '=';
  }
  return text;
}
