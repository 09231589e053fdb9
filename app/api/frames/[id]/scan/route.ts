import { frameIdSchema } from '@/lib/domain/schemas';
import { defineRoute } from '@/lib/server/define-route';
import { frameScan } from '@/lib/server/frame-bytes';

/** A whole line scan for a drawing: at most 1200 points as JSON. */
export const GET = defineRoute({
  name: 'frames.scan',
  permission: 'frames.see',
  schema: frameIdSchema,
  run: async ({ input, request }) => {
    const { sha256, draw } = await frameScan(input.id);
    const headers = {
      etag: `"${sha256.slice(0, 32)}"`,
      'cache-control': 'private, max-age=3600, must-revalidate',
    };
    if (request.headers.get('if-none-match') === headers.etag)
      return new Response(null, { status: 304, headers });
    return Response.json(await draw(), { headers });
  },
});
