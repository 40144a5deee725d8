'use client';

import { setNonce } from 'get-nonce';

/** Radix writes a style element when a dialog opens; the policy lets it only with the page's nonce. */
export function StyleNonce({ nonce }: { nonce: string | undefined }) {
  if (nonce) setNonce(nonce);
  return null;
}
