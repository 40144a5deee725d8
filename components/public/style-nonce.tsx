'use client';

import { getNonce, setNonce } from 'get-nonce';

/**
 * Radix writes a style element when a dialog opens; the policy lets it only with the document's nonce. A refresh brings
 * the nonce of its own answer, which the document's policy doesn't know: the first one holds.
 */
export function StyleNonce({ nonce }: { nonce: string | undefined }) {
  if (nonce && typeof window !== 'undefined' && !getNonce()) setNonce(nonce);
  return null;
}
