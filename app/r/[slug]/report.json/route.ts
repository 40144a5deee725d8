import { readReport } from '@/lib/server/reports';
import { route } from '@/lib/server/route';
import { UserError } from '@/lib/shared/errors';

/** The frozen bytes, exactly those that the page's SHA-256 is of. */
export const GET = route({ access: 'public' }, async ({ params }) => {
  const report = await readReport(params.slug);
  if (!report) throw new UserError('notFound', 'There is no report at this address.');
  return new Response(report.json, {
    headers: {
      'content-type': 'application/json',
      'cache-control': 'public, max-age=60',
      etag: `"${report.sha256}"`,
      'x-content-type-options': 'nosniff',
    },
  });
});
