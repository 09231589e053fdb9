import { frameIdSchema } from '@/lib/domain/schemas';
import { defineRoute } from '@/lib/server/define-route';
import { framePhoto } from '@/lib/server/frame-bytes';

/** The frame as a person sees it: a WebP of at most 1600 px. */
export const GET = defineRoute({
  name: 'frames.photo',
  permission: 'frames.see',
  schema: frameIdSchema,
  run: async ({ input, request }) => {
    const { webp, tag } = await framePhoto(input.id);
    const headers = { etag: tag, 'cache-control': 'private, max-age=3600, must-revalidate' };
    if (request.headers.get('if-none-match') === tag) return new Response(null, { status: 304, headers });
    return new Response(webp, {
      headers: { ...headers, 'content-type': 'image/webp', 'content-length': String(webp.length) },
    });
  },
});
