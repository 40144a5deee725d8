import { mkdtempSync, rmSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';

/** A temporary folder for files handed to a foreign program. */
export function temporaryFolder(): { path(name: string): string; remove(): void } {
  const folder = mkdtempSync(join(tmpdir(), 'mendlight-oracle-'));
  return {
    path: (name) => join(folder, name),
    remove: () => rmSync(folder, { recursive: true, force: true }),
  };
}
