import { AppError } from '@/lib/domain/errors';
import { certificateUploadSchema } from '@/lib/domain/setup-schemas';
import { addCertificate } from '@/lib/server/commands/add-certificate';
import { defineRoute } from '@/lib/server/define-route';
import { bodyOf, readAway } from '@/lib/server/request-body';

/** A certificate (PDF, PNG or JPEG) as the body; answers what a value names it by. */
export const POST = defineRoute({
  name: 'certificates.add',
  permission: 'certificates.add',
  schema: certificateUploadSchema,
  body: 'stream',
  rate: { burst: 20, perMinute: 40 },
  run: async ({ input, context, request }) => {
    const declaredBytes = Number(request.headers.get('content-length') ?? Number.NaN);
    if (!Number.isInteger(declaredBytes))
      throw new AppError('BAD_INPUT', 'The upload does not say how large the file is.');
    const body = bodyOf(request);
    try {
      return Response.json(await addCertificate(context, { fileName: input.name, declaredBytes, body }));
    } catch (problem) {
      await readAway(body);
      throw problem;
    }
  },
});
