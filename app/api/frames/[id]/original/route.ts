import { Readable } from 'node:stream';
import { frameIdSchema } from '@/lib/domain/schemas';
import { defineRoute } from '@/lib/server/define-route';
import { frameOriginal } from '@/lib/server/frame-bytes';

/** The frame's bytes as they were received, always as a download. */
export const GET = defineRoute({
  name: 'frames.original',
  permission: 'frames.see',
  schema: frameIdSchema,
  run: async ({ input }) => {
    const { body, bytes, fileName, mediaType } = await frameOriginal(input.id);
    return new Response(Readable.toWeb(body) as ReadableStream<Uint8Array>, {
      headers: {
        'content-type': mediaType,
        'content-length': String(bytes),
        // RFC 6266 with RFC 8187: the name survives whatever letters it has.
        'content-disposition': `attachment; filename="frame-${input.id}"; filename*=UTF-8''${encodeURIComponent(fileName)}`,
      },
    });
  },
});
