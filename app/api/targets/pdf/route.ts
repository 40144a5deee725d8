import { newPrintId, targetPdf } from '@/lib/server/print/target-pdf';
import { route } from '@/lib/server/route';
import { targetPrintSchema } from '@/lib/shared/schemas';

export const GET = route({ access: 'signed-in', query: targetPrintSchema }, async ({ query }) => {
  const printId = newPrintId();
  const pdf = await targetPdf(query, printId);
  return new Response(new Uint8Array(pdf), {
    headers: {
      'content-type': 'application/pdf',
      'content-disposition': `attachment; filename="mendlight-target-${query.shape}-${query.paper}-${printId}.pdf"`,
      'cache-control': 'no-store',
    },
  });
});
