import { trialBatchSchema } from '@/lib/domain/review-schemas';
import { logTrials } from '@/lib/server/commands/log-trials';
import { defineRoute } from '@/lib/server/define-route';

/** Regions tried and not kept; a page that is left can still send to a route. */
export const POST = defineRoute({
  name: 'frames.trials',
  permission: 'readings.fit',
  schema: trialBatchSchema,
  body: 'json',
  run: async ({ input, context }) => {
    await logTrials(context, { frameId: input.id, readingId: input.readingId, trials: input.trials });
    return new Response(null, { status: 204 });
  },
});
