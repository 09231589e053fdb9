import { overTimeSchema } from '@/lib/domain/schemas';
import { defineRoute } from '@/lib/server/define-route';
import { overTimeCsv } from '@/lib/server/over-time-csv';
import { overTime } from '@/lib/server/queries/over-time';

/** The chart's points as CSV, with the limits that held for each. */
export const GET = defineRoute({
  name: 'over-time.csv',
  permission: 'charts.see',
  schema: overTimeSchema,
  run: async ({ input }) => {
    const view = await overTime({ benchId: input.bench, choice: input.choice, last: input.last });
    return new Response(overTimeCsv(view), {
      headers: {
        'content-type': 'text/csv; charset=utf-8',
        'content-disposition': 'attachment; filename="over-time.csv"',
      },
    });
  },
});
