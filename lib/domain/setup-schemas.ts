/** What comes in about setups, checked once. */
import { z } from 'zod';
import { LIMITS } from './limits';
import { finite, id, positive, sha256Text, words } from './schemas';
import { divisorOf, UNCERTAINTY_SHAPES } from './setup';

/** One value with its ± as stated, and how that is known. `k` of anything but an expanded ± follows from its shape. */
export const statedSchema = (what: string) =>
  z
    .object({
      value: positive(what),
      stated: positive(`The ± of ${what.toLowerCase()}`),
      shape: z.enum(UNCERTAINTY_SHAPES).default('expanded'),
      k: finite('k')
        .refine((k) => k >= 1 && k <= 10, 'k lies between 1 and 10.')
        .default(2),
      dof: positive('Degrees of freedom').nullable().default(null),
      certificate: z.string().trim().max(300).default(''),
      file: sha256Text.nullable().default(null),
      due: z.iso.date('A due date looks like 2027-03-01.').nullable().default(null),
    })
    .refine((value) => value.stated < value.value, {
      path: ['stated'],
      message: 'The ± is as large as the value itself.',
    })
    .refine((value) => value.shape !== 'type-a' || value.dof !== null, {
      path: ['dof'],
      message: 'A scatter needs its degrees of freedom.',
    })
    .transform((value) => ({ ...value, k: divisorOf(value.shape, value.k) }));

/** Why a value that looks odd is right; empty: nothing was confirmed. */
const confirmed = z.string().trim().max(300).default('');

export const setupSchema = z
  .object({
    benchId: id,
    /** The number the person saw as the newest; another one means someone was faster. */
    afterNumber: z.number().int().min(0),
    /** Null: as soon as it is approved. */
    inForceFrom: z.iso.datetime('A date and time look like 2027-03-01T08:00:00Z.').nullable().default(null),
    plate: z.string().trim().min(1, 'Name the slit plate.').max(60),
    scaleUmPerPx: statedSchema('Pixel scale'),
    separationUm: statedSchema('Slit separation'),
    widthUm: statedSchema('Slit width'),
    distanceMm: statedSchema('Distance'),
    confirmed: z
      .object({
        scaleUmPerPx: confirmed,
        separationUm: confirmed,
        widthUm: confirmed,
        distanceMm: confirmed,
      })
      .prefault({}),
    remountNm: z
      .object({ u: positive('Re-mount'), dof: positive('Degrees of freedom').nullable() })
      .nullable()
      .default(null),
    tone: z.enum(['auto', 'linear', 'srgb']).default('auto'),
    camera: z
      .object({
        model: z.string().trim().max(80).default(''),
        serial: z.string().trim().max(80).default(''),
        bits: z
          .number({ error: 'The bit depth is a whole number.' })
          .int('The bit depth is a whole number.')
          .min(8, 'A camera writes at least 8 bits.')
          .max(16, 'At most 16 bits are read.')
          .nullable()
          .default(null),
      })
      .prefault({}),
    why: words('Why'),
  })
  .refine((s) => s.widthUm.value < s.separationUm.value, {
    path: ['widthUm', 'value'],
    message: 'The slit width must be smaller than the separation.',
  });

export const decideSetupSchema = z
  .object({
    setupId: id,
    decision: z.enum(['approved', 'declined']),
    reason: z.string().trim().max(LIMITS.wordsLength).default(''),
  })
  .refine((d) => d.decision !== 'declined' || d.reason.length > 0, {
    path: ['reason'],
    message: 'Say why it is declined: whoever entered it reads this.',
  });
export const takeBackSetupSchema = z.object({ setupId: id });

export const certificateUploadSchema = z.object({
  name: z.string().trim().min(1, 'The file has no name.').max(1000),
});
export const certificateSchema = z.object({ sha256: sha256Text });
