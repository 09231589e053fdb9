import { previewFitSchema } from '@/lib/domain/schemas';
import { previewFit } from '@/lib/server/commands/keep-fit';
import { defineRoute } from '@/lib/server/define-route';

/** A fit with another region, shown and not kept. */
export const POST = defineRoute({
  name: 'frames.preview-fit',
  permission: 'readings.fit',
  schema: previewFitSchema,
  body: 'json',
  rate: { burst: 60, perMinute: 240 },
  run: async ({ input }) => Response.json(await previewFit(input.id, input)),
});
