import { readingStackSchema, regionStackSchema } from '@/lib/domain/schemas';
import { requireEngine, stackForRegion, stackOfReading } from '@/lib/server/band-stacks';
import { defineRoute } from '@/lib/server/define-route';
import { fitFacts, loadFrame } from '@/lib/server/frame-facts';
import { stackResponse } from '@/lib/server/stack-response';

/** The band stack a reading was measured from, for fits in the browser. */
export const GET = defineRoute({
  name: 'frames.stack',
  permission: 'readings.fit',
  schema: readingStackSchema,
  rate: { burst: 60, perMinute: 120 },
  run: async ({ input, request }) => {
    requireEngine(input.engine);
    const frame = await loadFrame(input.id);
    const stack = await stackOfReading(frame, await fitFacts(frame), input.reading);
    // Reading and engine name the bytes for good.
    return stackResponse(stack, request, 'private, max-age=31536000, immutable');
  },
});

/** A new band stack for a region that left the last one, or was turned against it. */
export const POST = defineRoute({
  name: 'frames.new-stack',
  permission: 'readings.fit',
  schema: regionStackSchema,
  body: 'json',
  rate: { burst: 30, perMinute: 60 },
  run: async ({ input, request }) => {
    requireEngine(input.engine);
    const frame = await loadFrame(input.id);
    return stackResponse(await stackForRegion(frame, await fitFacts(frame), input), request, 'no-store');
  },
});
