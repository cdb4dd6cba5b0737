import { sha256 } from '@noble/hashes/sha2.js';
import { bytesToHex, utf8ToBytes } from '@noble/hashes/utils.js';
import canonicalize from 'canonicalize';

/**
 * The one text of a JSON value: keys sorted, no white space, numbers as JavaScript prints them.
 * Phone and server must agree on every byte, because the digest is taken over this text.
 *
 * @param content  a JSON value without undefined, NaN or Infinity
 * @returns        canonical JSON
 * @throws {TypeError} when the value has no JSON text
 * @see RFC 8785, JSON Canonicalization Scheme
 */
export function canonicalText(content: unknown): string {
  const text = canonicalize(content);
  if (text === undefined) throw new TypeError('canonicalText: this value has no JSON text');
  return text;
}

/**
 * SHA-256 of a text's UTF-8 bytes.
 *
 * @param text  any string
 * @returns     64 lower-case hexadecimal digits
 * @see FIPS 180-4. Not WebCrypto: that one is missing on plain http addresses, and asynchronous.
 */
export function digestOf(text: string): string {
  return bytesToHex(sha256(utf8ToBytes(text)));
}
