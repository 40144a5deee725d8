import { type NextRequest, NextResponse } from 'next/server';

/** Puts a fresh nonce on every page; the layout reads it, Next puts it on its own scripts. */
export function proxy(request: NextRequest): NextResponse {
  const nonce = btoa(crypto.randomUUID());
  const policy = pagePolicy(nonce, process.env.NODE_ENV === 'development');
  const headers = new Headers(request.headers);
  headers.set('x-nonce', nonce);
  headers.set('content-security-policy', policy);
  const response = NextResponse.next({ request: { headers } });
  response.headers.set('content-security-policy', policy);
  return response;
}

/** In development Next's overlay needs eval and styles without a nonce. */
function pagePolicy(nonce: string, development: boolean): string {
  return [
    "default-src 'self'",
    `script-src 'self' 'nonce-${nonce}' 'strict-dynamic'${development ? " 'unsafe-eval'" : ''}`,
    `style-src 'self' ${development ? "'unsafe-inline'" : `'nonce-${nonce}'`}`,
    "style-src-attr 'unsafe-inline'",
    "img-src 'self' blob: data:",
    "font-src 'self'",
    "connect-src 'self'",
    "object-src 'none'",
    "base-uri 'none'",
    "form-action 'self'",
    "frame-ancestors 'none'",
  ].join('; ');
}

// Pages only. A request body on a matched path is cut at 10 MB, so the API, uploads above all, must stay outside; the
// public report brings its own stricter policy.
export const config = {
  matcher: ['/((?!api/|r/|_next/|fonts/|example/|icon|robots\\.txt).*)'],
};
