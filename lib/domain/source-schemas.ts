/** What comes in about sources, checked once. */
import { z } from 'zod';
import { finite, id, positive, sha256Text } from './schemas';
import { SOURCE_KINDS } from './source';

/** What a source's wavelength stands on. */
const certified = {
  vacuumNm: finite('Wavelength').refine(
    (v) => v >= 200 && v <= 2000,
    'The wavelength lies between 200 and 2000 nm.',
  ),
  uNm: positive('The standard uncertainty'),
  certificate: z.string().trim().max(300).default(''),
  file: sha256Text.nullable().default(null),
  due: z.iso.date('A due date looks like 2027-03-01.').nullable().default(null),
};

export const sourceSchema = z
  .object({
    name: z.string().trim().min(1, 'The source needs a name.').max(60),
    kind: z.enum(SOURCE_KINDS, 'Say what kind of source it is.'),
    isReference: z.boolean().default(true),
    ...certified,
    note: z.string().trim().max(300).default(''),
  })
  .refine((s) => s.kind !== 'product' || !s.isReference, {
    path: ['isReference'],
    message: 'A product’s wavelength is what is to be measured, so it is no reference.',
  })
  .refine((s) => s.kind !== 'stabilised-laser' || !s.isReference || s.certificate !== '', {
    path: ['certificate'],
    message: 'A stabilised laser’s value stands on its certificate: name it.',
  });

export const renewSourceSchema = z.object({
  sourceId: id,
  /** The revision the person saw as the newest; another one means someone was faster. */
  afterNumber: z.number().int().min(1),
  ...certified,
});
