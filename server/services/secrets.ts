import { createHash, randomBytes, randomInt } from 'node:crypto';
import { CLASS_CODE_ALPHABET } from '@shared/schemas/accounts';

/** 256 random bits, as they stand in a link. */
export const newToken = () => randomBytes(32).toString('base64url');

/** What is kept of a token. It has 256 random bits, so a plain hash cannot be searched. */
export const tokenHash = (token: string) => createHash('sha256').update(token).digest('hex');

export const newPin = () => randomInt(1_000_000).toString().padStart(6, '0');

export const newClassCode = () => lettersFrom(CLASS_CODE_ALPHABET, 6);

/** For a person to read out and compare: it names a receipt, it protects nothing. */
export const newReceiptCode = () => lettersFrom(CLASS_CODE_ALPHABET, 4);

function lettersFrom(alphabet: string, count: number): string {
  return Array.from({ length: count }, () => alphabet[randomInt(alphabet.length)]).join('');
}
