/** What comes in over the wire, checked once. Sentences are what a form shows beside the field. */
import { z } from 'zod';
import { LIMITS } from './limits';
import { ROLES } from './roles';
import { SCALE_KINDS } from './scale-result';
import { METHODS } from './specification';
import { OUTCOMES, RETURN_REASONS } from './views';

export const finite = (what: string) =>
  z.number({ error: `${what} must be a number.` }).refine(Number.isFinite, `${what} must be a number.`);
export const positive = (what: string) => finite(what).refine((v) => v > 0, `${what} must be larger than 0.`);
export const words = (what: string, min = 1) =>
  z
    .string()
    .trim()
    .min(min, `${what} is missing.`)
    .max(LIMITS.wordsLength, `${what} is longer than ${LIMITS.wordsLength} characters.`);
export const id = z.number().int().positive();

export const passwordSchema = z
  .string()
  .min(LIMITS.passwordShortest, `A password has at least ${LIMITS.passwordShortest} characters.`)
  .max(LIMITS.passwordLongest, `A password has at most ${LIMITS.passwordLongest} characters.`);
export const emailSchema = z
  .string()
  .trim()
  .toLowerCase()
  .max(254)
  .pipe(z.email('This is not an e-mail address.'));

export const regionSchema = z.object({
  cxPx: finite('Centre x'),
  cyPx: finite('Centre y'),
  lengthPx: positive('Length'),
  heightPx: positive('Height'),
  angleDeg: finite('Tilt').refine((v) => v > -180 && v <= 180, 'Tilt lies between -180 and 180 degrees.'),
});
export const scanRegionSchema = z
  .object({ fromMm: finite('From'), toMm: finite('To') })
  .refine((region) => region.fromMm < region.toMm, 'The region ends before it begins.');
const detectorMm = positive('The width of the detector').refine(
  (mm) => mm <= 1000,
  'A detector is at most 1000 mm wide.',
);
export const regionChangeSchema = z.object({
  region: z.union([regionSchema, scanRegionSchema]),
  detectorMm: detectorMm.nullable().optional(),
  leaveOut: z
    .array(z.number().refine((m) => Number.isInteger(2 * m), 'An order is whole or half.'))
    .max(400)
    .default([]),
  zeroShift: z.number().int().min(-400).max(400).default(0),
});
export const sha256Text = z.string().regex(/^[0-9a-f]{64}$/, 'This is not a SHA-256.');
export const refitSchema = regionChangeSchema.extend({
  /** The band stack the person's numbers came from; null: the server makes one for the region. */
  stackSha256: sha256Text.nullable().default(null),
  /** The numbers the person saw, in the engine's own digits. */
  seen: z
    .object({
      spacingPx: z.number(),
      uSpacingPx: z.number(),
      wavelengthNm: z.number().nullable(),
      expandedNm: z.number().nullable(),
    })
    .nullable()
    .default(null),
  frameId: id,
  fromReadingId: id.nullable(),
  fromVersion: z.number().int().min(0),
});

export const sendSchema = z.object({
  readings: z
    .array(
      z.object({
        readingId: id,
        version: z.number().int().min(0),
        note: z.string().trim().max(LIMITS.wordsLength).default(''),
      }),
    )
    .min(1)
    .max(500),
});
export const lookAnswerSchema = z.object({
  check: z.string().max(60),
  answer: z.enum(['accept-as-is', 'set-aside']),
  reason: words('The reason'),
});
export const acceptSchema = z.object({
  readingId: id,
  version: z.number().int().min(0),
  /** '' where one typed a few minutes ago is to count. */
  password: z.string().max(LIMITS.passwordLongest).default(''),
  answers: z.array(lookAnswerSchema).max(60).default([]),
  /** Why the value was moved, where nobody has said so yet. */
  moveReason: z.string().trim().max(LIMITS.wordsLength).default(''),
});
export const returnSchema = z.object({
  readingId: id,
  version: z.number().int().min(0),
  reason: z.enum(RETURN_REASONS),
  words: z.string().trim().max(LIMITS.wordsLength).default(''),
});
export const outcomeSchema = z.object({
  unitId: id,
  outcome: z.enum(OUTCOMES),
  reason: z.string().trim().max(LIMITS.wordsLength).default(''),
});

export const benchSchema = z.object({
  name: z.string().trim().min(1, 'The bench needs a name.').max(60),
  note: z.string().trim().max(LIMITS.wordsLength).default(''),
});
export const specificationSchema = z
  .object({
    name: z.string().trim().min(1, 'The specification needs a name.').max(80),
    nominalNm: finite('Nominal').refine(
      (v) => v >= 200 && v <= 2000,
      'The nominal lies between 200 and 2000 nm.',
    ),
    medium: z.enum(['air', 'vacuum']),
    lowerNm: finite('Lower limit').nullable(),
    upperNm: finite('Upper limit').nullable(),
    rule: z.enum(['simple', 'guard-expanded', 'guard-one-sided', 'guard-own']),
    ownGuardNm: positive('The guard band').nullable().default(null),
    ratio: positive('The ratio').nullable().default(null),
    halfToleranceNm: positive('Half the tolerance').nullable().default(null),
    method: z.enum(METHODS).nullable().default(null),
    atTemperature: z
      .object({
        temperatureC: finite('The temperature').refine(
          (t) => t >= -60 && t <= 150,
          'The temperature lies between −60 and 150 °C.',
        ),
        nmPerK: finite('nm per K').refine(
          (v) => Math.abs(v) <= 5,
          'A wavelength moves by at most 5 nm per K.',
        ),
        uNmPerK: finite('The ± of nm per K').refine((v) => v >= 0, 'The ± of nm per K is not negative.'),
      })
      .nullable()
      .default(null),
  })
  .refine((s) => s.lowerNm !== null || s.upperNm !== null, {
    path: ['lowerNm'],
    message: 'Give at least one limit.',
  })
  .refine((s) => s.lowerNm === null || s.upperNm === null || s.lowerNm < s.upperNm, {
    path: ['upperNm'],
    message: 'The upper limit must be above the lower one.',
  })
  .refine((s) => (s.lowerNm !== null && s.upperNm !== null) || s.halfToleranceNm !== null, {
    path: ['halfToleranceNm'],
    message: 'With one limit only, state half the tolerance.',
  })
  .refine((s) => s.rule !== 'guard-own' || s.ownGuardNm !== null, {
    path: ['ownGuardNm'],
    message: 'State the width of the guard band.',
  });
export const lotSchema = z.object({
  number: z.string().trim().min(1, 'The lot needs a number.').max(40),
  specificationId: id,
  supplier: z.string().trim().max(120).default(''),
});
export const unitsSchema = z.object({
  lotId: id,
  serials: z
    .array(
      z
        .string()
        .trim()
        .min(1)
        .max(LIMITS.serialLength, `A serial has at most ${LIMITS.serialLength} characters.`),
    )
    .min(1, 'There is no serial in it.')
    .max(LIMITS.unitsAtOnce, `At most ${LIMITS.unitsAtOnce} units at once.`),
});
export const personSchema = z.object({
  name: z.string().trim().min(1, 'The person needs a name.').max(80),
  email: emailSchema,
  roles: z.array(z.enum(ROLES)).min(1, 'Choose at least one role.'),
});
/** Calendar day in UTC at whose end the access ends; null: without end. */
const lastDay = z.iso.date('A last day looks like 2027-03-01.').nullable().default(null);
const passFits = ({ roles, lastDay: day }: { roles: readonly string[]; lastDay: string | null }) =>
  !roles.includes('auditor') || (roles.length === 1 && day !== null);
const PASS = {
  path: ['roles'],
  message: 'An auditor holds no other role and has a last day.',
};
export const newPersonSchema = personSchema
  .extend({ password: passwordSchema, lastDay })
  .refine(passFits, PASS);
export const personChangeSchema = z
  .object({ personId: id, roles: z.array(z.enum(ROLES)), active: z.boolean(), lastDay })
  .refine(passFits, PASS);
export const forgottenSchema = z.object({ email: emailSchema });
export const resetSchema = z.object({ token: z.string().min(20).max(200), password: passwordSchema });
export const firstAdminSchema = personSchema.omit({ roles: true }).extend({ password: passwordSchema });
export const retireSchema = z.object({ id });
export const chooseBenchSchema = z.object({ benchId: id.nullable() });
/** For what takes nothing in. */
export const nothingSchema = z.void();

/** ---- what routes take from path and query, where everything comes as text ---- */
const idText = z.coerce.number<string>().int().positive();
const maybeIdText = z.preprocess(
  (text) => (text === '' || text === undefined ? null : text),
  idText.nullable(),
);
export const frameIdSchema = z.object({ id: idText });
export const uploadSchema = z.object({
  name: z.string().min(1, 'The file has no name.').max(1000),
  benchId: idText,
  lotId: maybeIdText,
  serial: z
    .string()
    .trim()
    .max(LIMITS.serialLength)
    .default('')
    .transform((serial) => serial || null),
  sourceId: maybeIdText,
  /** Of a line scan; a picture has none. */
  detectorMm: z.preprocess(
    (text) => (text === '' || text === undefined ? null : Number(text)),
    detectorMm.nullable(),
  ),
});
export const statusSchema = z.object({
  ids: z
    .string()
    .transform((text) => text.split(','))
    .pipe(z.array(idText).min(1).max(LIMITS.filesAtOnce)),
});
export const previewFitSchema = regionChangeSchema.extend({
  id: idText,
  stackSha256: sha256Text.nullable().default(null),
});
/** Version of the engine that will measure from the stack. */
const engineText = z.string().min(1).max(40);
export const readingStackSchema = z.object({ id: idText, reading: idText, engine: engineText });
export const regionStackSchema = regionChangeSchema.extend({
  id: idText,
  engine: engineText,
  region: regionSchema,
});
export const overTimeSchema = z.object({
  bench: maybeIdText,
  choice: z.string().max(40).default(''),
  last: z.coerce.number().int().min(0).max(100_000).default(0),
});
export const scaleSchema = z.object({
  kind: z.enum(SCALE_KINDS),
  pitchMm: z.coerce.number().pipe(positive('The pitch')),
  /** Expanded uncertainty (k = 2) of the pitch in per cent of it, as a ruler's maker states it. */
  pitchPercent: z.coerce
    .number()
    .min(0, 'The ± of the pitch is not negative.')
    .max(10, 'A scale this uncertain is no scale.')
    .default(0),
});
