import { AppError } from '@/lib/domain/errors';
import { LIMITS } from '@/lib/domain/limits';
import { scaleSchema } from '@/lib/domain/schemas';
import { measureScalePicture } from '@/lib/server/commands/measure-scale-picture';
import { tooLarge } from '@/lib/server/commands/receive-frame';
import { defineRoute } from '@/lib/server/define-route';
import { bodyOf, readAway } from '@/lib/server/request-body';

/** A photographed ruler or grid as the body; answers the pixel scale. */
export const POST = defineRoute({
  name: 'scale',
  permission: 'setups.add',
  schema: scaleSchema,
  body: 'stream',
  rate: { burst: 10, perMinute: 20 },
  run: async ({ input, request }) => {
    const declaredBytes = Number(request.headers.get('content-length') ?? Number.NaN);
    if (!Number.isInteger(declaredBytes))
      throw new AppError('BAD_INPUT', 'The upload does not say how large the file is.');
    if (declaredBytes > LIMITS.fileBytes) throw tooLarge();
    const body = bodyOf(request);
    try {
      const { kind, pitchMm, pitchPercent } = input;
      return Response.json(
        await measureScalePicture(body, { kind, pitchMm, uPitchRelative: pitchPercent / 200 }),
      );
    } catch (problem) {
      await readAway(body);
      throw problem;
    }
  },
});
