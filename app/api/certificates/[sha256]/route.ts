import { Readable } from 'node:stream';
import { certificateSchema } from '@/lib/domain/setup-schemas';
import { defineRoute } from '@/lib/server/define-route';
import { openCertificate } from '@/lib/server/queries/certificates';

/** A certificate as it was handed in, always as a download. */
export const GET = defineRoute({
  name: 'certificates.see',
  permission: 'certificates.see',
  schema: certificateSchema,
  run: async ({ input }) => {
    const { body, bytes, fileName, mediaType } = await openCertificate(input.sha256);
    return new Response(Readable.toWeb(body) as ReadableStream<Uint8Array>, {
      headers: {
        'content-type': mediaType,
        'content-length': String(bytes),
        // RFC 6266 with RFC 8187: the name survives whatever letters it has.
        'content-disposition': `attachment; filename="certificate"; filename*=UTF-8''${encodeURIComponent(fileName)}`,
      },
    });
  },
});
