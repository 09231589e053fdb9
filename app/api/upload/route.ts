import { AppError } from '@/lib/domain/errors';
import { LIMITS } from '@/lib/domain/limits';
import { uploadSchema } from '@/lib/domain/schemas';
import { receiveFrame, tooLarge } from '@/lib/server/commands/receive-frame';
import { defineRoute } from '@/lib/server/define-route';
import { bodyOf, readAway } from '@/lib/server/request-body';
import { framesByIds } from '@/lib/server/queries/frames';

/** One file per call, its bytes as the body. Answers 201 when bytes and row are both durable. */
export const POST = defineRoute({
  name: 'upload',
  permission: 'frames.upload',
  schema: uploadSchema,
  body: 'stream',
  rate: { burst: 2 * LIMITS.filesAtOnce, perMinute: LIMITS.filesAtOnce },
  run: async ({ input, context, request }) => {
    const declaredBytes = Number(request.headers.get('content-length') ?? Number.NaN);
    if (!Number.isInteger(declaredBytes))
      throw new AppError('BAD_INPUT', 'The upload does not say how large the file is.');
    if (declaredBytes > LIMITS.fileBytes) throw tooLarge();
    const { name, benchId, lotId, serial, sourceId, detectorMm } = input;
    const body = bodyOf(request);
    try {
      const { frameId, sameAs } = await receiveFrame(context, {
        fileName: name,
        benchId,
        lotId,
        serial,
        sourceId,
        detectorMm,
        declaredBytes,
        body,
      });
      const [frame] = await framesByIds([frameId]);
      return Response.json({ frameId, sameAs, frame }, { status: 201 });
    } catch (problem) {
      await readAway(body);
      throw problem;
    }
  },
});
