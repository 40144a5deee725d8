import 'server-only';
import { createHash } from 'node:crypto';
import { readFileSync } from 'node:fs';
import { createRequire } from 'node:module';
import { join } from 'node:path';
import { renderMissing, renderReport } from '@/components/report/render';
import { env } from '@/lib/server/env';
import { readReport } from '@/lib/server/reports';
import type { PublicReport } from '@/lib/shared/report';

/** The page is rendered once a version and standing and kept; a few hundred of them are some tens of megabytes. */
const kept = new Map<string, string>();
const mostKept = 300;

// Next's server bundle answers react-dom/server with a refusal; Node itself finds the real one. The report has no hooks.
type Renderer = typeof import('react-dom/server');
const nodeRequire = createRequire(join(process.cwd(), 'package.json'));
const toMarkup: Renderer['renderToStaticMarkup'] = (element) =>
  (nodeRequire('react-dom/server') as Renderer).renderToStaticMarkup(element);

let compiled: { css: string; policy: string } | undefined;

/** The stylesheet that `npm run build` compiled, and the policy that lets this one in and nothing else. */
function style() {
  if (!compiled) {
    const css = readFileSync(join(process.cwd(), 'dist/report.css'), 'utf8');
    const hash = createHash('sha256').update(css).digest('base64');
    const policy = [
      "default-src 'none'",
      `style-src 'sha256-${hash}'`,
      "img-src 'self'",
      "font-src 'self'",
      "base-uri 'none'",
      "form-action 'none'",
      "frame-ancestors 'none'",
    ].join('; ');
    compiled = { css, policy };
  }
  return compiled;
}

/** The report as a page for anyone, or a page that says there is none. */
export async function reportDocument(slug: string, request: Request): Promise<Response> {
  const report = await readReport(slug);
  const { css, policy } = style();
  const headers = {
    'content-type': 'text/html; charset=utf-8',
    'content-security-policy': policy,
    'x-content-type-options': 'nosniff',
  };
  if (!report) {
    const body = renderMissing(toMarkup, css);
    return new Response(body, {
      status: 404,
      headers: { ...headers, 'cache-control': 'no-store' },
    });
  }
  const state = stateOf(report);
  const etag = `W/"${state}"`;
  // A withdrawal must show within a minute; until then a copy may be used again.
  const fresh = { ...headers, etag, 'cache-control': 'public, max-age=60' };
  if (request.headers.get('if-none-match') === etag) {
    return new Response(null, { status: 304, headers: fresh });
  }
  return new Response(pageOf(report, state, css), { headers: fresh });
}

/** What the page depends on: the frozen bytes, whether they stand, and the stylesheet. */
function stateOf({ sha256, withdrawn, versions }: PublicReport): string {
  return createHash('sha256')
    .update(JSON.stringify([sha256, withdrawn, versions, style().policy, env().APP_URL]))
    .digest('hex')
    .slice(0, 32);
}

function pageOf(report: PublicReport, state: string, css: string): string {
  const known = kept.get(state);
  if (known) return known;
  const { content, ...standing } = report;
  const page = renderReport(toMarkup, { content, standing, css, origin: env().APP_URL });
  if (kept.size >= mostKept) kept.delete(kept.keys().next().value ?? '');
  kept.set(state, page);
  return page;
}
