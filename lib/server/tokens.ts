import 'server-only';
import { createHash, randomBytes } from 'node:crypto';

/** A secret for a link: 256 bits. Only its hash is kept. */
export const newToken = () => randomBytes(32).toString('base64url');
export const tokenHash = (token: string) => createHash('sha256').update(token).digest('hex');
