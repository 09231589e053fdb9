/** The server actions the checks of a bench are given, as the components see them. */
import type { z } from 'zod';
import type { ActionAnswer } from '@/lib/domain/errors';
import type { benchRuleSchema, releaseBenchSchema } from '@/lib/domain/references';

export type ReleaseBench = (input: z.input<typeof releaseBenchSchema>) => Promise<ActionAnswer<unknown>>;
export type SetBenchRule = (input: z.input<typeof benchRuleSchema>) => Promise<ActionAnswer<unknown>>;
