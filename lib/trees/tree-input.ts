import { z } from 'zod'
import { RECESS_CLASSES, SPACINGS } from '@/lib/coats/vocabulary'
import { readTyped } from '@/lib/format/typed-units'
import { fromSi, type MassUnit } from '@/lib/format/units'
import { typedNumber } from '@/lib/format/typed-number'

export const CUP_KINDS = ['wax', 'paper', 'ceramic'] as const
export type CupKind = (typeof CUP_KINDS)[number]

export const WAX_SURFACES = ['washed', 'etched'] as const
export type WaxSurface = (typeof WAX_SURFACES)[number]

export const treeTag = z
  .string()
  .regex(/^[A-Z]{1,3}-\d{1,5}$/, 'A tag is one to three capital letters, a dash and a number, such as T-128.')

const optionalText = (schema: z.ZodType<string>) =>
  z.preprocess((value) => (value === '' || value === undefined ? null : value), schema.nullable())

/** A mass as somebody types it in their unit, more than nothing and at most `mostKg`; it comes out in kg. */
const typedMass = (field: string, mostKg: number, unit: MassUnit) =>
  typedNumber(field).pipe(
    z
      .number()
      .gt(0, `${field} is more than 0 ${unit}.`)
      .transform((value) => readTyped(value, unit))
      .pipe(z.number().max(mostKg, `${field} is at most ${Math.floor(fromSi(mostKg, unit)).toLocaleString('en')} ${unit}.`)),
  )

const pieceInput = z.strictObject({
  workTitle: z.string().trim().min(1, 'Name the work.').max(80, 'A title has at most 80 letters.'),
  sectionName: z.string().trim().max(60, 'A section has at most 60 letters.'),
  editionNumber: typedNumber('The edition number').pipe(
    z.int('An edition number is whole.').min(1, 'Editions start at 1.').max(9999, 'Editions end at 9999.'),
  ),
  isRecast: z.boolean(),
})

/** What a supervisor enters for a tree, with its masses in their unit; the values come out in kg. */
export const treeInputIn = (massUnit: MassUnit) =>
  z.strictObject({
    tag: treeTag,
    recipeVersionId: z.uuid('Choose a recipe.'),
    placeId: z.uuid('Choose where it hangs.'),
    pieces: z.array(pieceInput).min(1, 'A tree carries at least one piece.').max(40, 'A tree carries at most 40 pieces.'),
    waxMassKg: typedMass('Wax mass', 500, massUnit),
    cupKind: z.enum(CUP_KINDS, 'Choose the kind of cup.'),
    cupVolumeL: typedNumber('Cup volume').pipe(z.number().min(0, 'Cup volume is not under 0 L.').max(50, 'Cup volume is at most 50 L.')),
    recessClass: z.enum(RECESS_CLASSES, 'Choose the deepest recess.'),
    spacing: z.enum(SPACINGS, 'Choose the spacing.'),
    hungMassKg: z.preprocess(
      (value) => (value === '' || value === undefined ? null : value),
      typedMass('Weight', 2000, massUnit).nullable(),
    ),
    pourDate: optionalText(z.iso.date('A pour date is a day, such as 2026-12-18.')),
  })
/** The same in kg: for programs, and for what is stored. */
export const treeInput = treeInputIn('kg')
export type TreeInput = z.infer<typeof treeInput>

/** Intake: passed only as a whole; what is not ticked stays open. */
export const intakeInput = z.strictObject({
  waxSurface: z.enum(WAX_SURFACES).nullable(),
  isWaxAtRoomTemp: z.boolean(),
  isCupFirm: z.boolean(),
  areVentsAndCorePinsIn: z.boolean(),
})
export type IntakeInput = z.infer<typeof intakeInput>

export const reasonInput = z.string().trim().min(1, 'Say why in a few words.').max(300, 'A reason has at most 300 letters.')

/** How dryness was confirmed where the clock alone is not enough. */
export const CONFIRMATIONS = ['touch', 'weight', 'temperature'] as const
export type Confirmation = (typeof CONFIRMATIONS)[number]
