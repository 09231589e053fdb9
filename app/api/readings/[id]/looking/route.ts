import { lookingSchema } from '@/lib/domain/review-schemas';
import { defineRoute } from '@/lib/server/define-route';
import { lookAt } from '@/lib/server/presence';
import { findReading } from '@/lib/server/reading-facts';

/** The page of a reading is open; answers who else has it open. */
export const POST = defineRoute({
  name: 'readings.looking',
  permission: 'readings.return',
  schema: lookingSchema,
  run: async ({ input, me, context }) => {
    await findReading(input.id);
    return Response.json({ others: lookAt(input.id, me, context.at) });
  },
});
