import { statusSchema } from '@/lib/domain/schemas';
import { defineRoute } from '@/lib/server/define-route';
import { framesByIds } from '@/lib/server/queries/frames';

/** Where these frames stand, for a page that shows them as they change. */
export const GET = defineRoute({
  name: 'frames.status',
  permission: 'frames.see',
  schema: statusSchema,
  run: async ({ input }) => Response.json({ frames: await framesByIds(input.ids) }),
});
