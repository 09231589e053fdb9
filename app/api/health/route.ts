import { defineOpenRoute } from '@/lib/server/define-route';
import { health } from '@/lib/server/health';

export const dynamic = 'force-dynamic';

/** Is the product whole? For whoever watches over it; tells nothing about data. */
export const GET = defineOpenRoute({
  name: 'health',
  run: async () => {
    const state = await health();
    return Response.json(state, { status: state.ok ? 200 : 503 });
  },
});
