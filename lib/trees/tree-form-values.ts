import type { z } from 'zod'
import { typedText } from '@/lib/format/typed-units'
import type { MassUnit } from '@/lib/format/units'
import { formText as text } from '@/lib/format/form-text'
import type { TreeDetail } from '@/lib/trees/detail-contract'
import type { FixedFields } from '@/lib/trees/fixed-fields'

/** A piece as typed. */
export type PieceValues = { workTitle: string; sectionName: string; editionNumber: string; isRecast: boolean }

/** A tree as typed: text as it stands in the fields, so that nothing is lost when the form comes back. Masses are in the typist's unit. */
export type TreeFormValues = {
  tag: string
  recipeVersionId: string
  placeId: string
  pieces: PieceValues[]
  waxMassKg: string
  cupKind: string
  cupVolumeL: string
  recessClass: string
  spacing: string
  hungMassKg: string
  pourDate: string
}

const MOST_PIECES = 41

/** Form fields to the tree form's values. Pieces come as `pieces.0.workTitle`, `pieces.0.isRecast`, and so on, from 0 without a gap. */
export function readTreeForm(form: FormData): TreeFormValues {
  const pieces: PieceValues[] = []
  for (let index = 0; index < MOST_PIECES && form.has(`pieces.${index}.workTitle`); index += 1) {
    pieces.push({
      workTitle: text(form, `pieces.${index}.workTitle`),
      sectionName: text(form, `pieces.${index}.sectionName`),
      editionNumber: text(form, `pieces.${index}.editionNumber`),
      isRecast: form.get(`pieces.${index}.isRecast`) === 'on',
    })
  }
  return {
    tag: text(form, 'tag').toUpperCase(),
    recipeVersionId: text(form, 'recipeVersionId'),
    placeId: text(form, 'placeId'),
    pieces,
    waxMassKg: text(form, 'waxMassKg'),
    cupKind: text(form, 'cupKind'),
    cupVolumeL: text(form, 'cupVolumeL'),
    recessClass: text(form, 'recessClass'),
    spacing: text(form, 'spacing'),
    hungMassKg: text(form, 'hungMassKg'),
    pourDate: text(form, 'pourDate'),
  }
}

/** One sentence a field, by its path: `waxMassKg`, `pieces.0.workTitle`. The first complaint about a field is the one to say. */
export type FieldErrors = Record<string, string>

/** The first sentence for each field of a form that was not accepted, by its path. */
export function fieldErrors(error: z.ZodError): FieldErrors {
  const errors: FieldErrors = {}
  for (const issue of error.issues) {
    const path = issue.path.map(String).join('.')
    errors[path] ??= issue.message
  }
  return errors
}

type KnownTree = Pick<TreeDetail, 'waxMassKg' | 'cupKind' | 'cupVolumeL' | 'recessClass' | 'spacing' | 'hungMassKg' | 'pieces'> & {
  recipe: Pick<TreeDetail['recipe'], 'versionId'>
  tree: Pick<TreeDetail['tree'], 'tag' | 'place' | 'pourDate'>
}

/** A known tree as its form shows it, with its masses in this unit. */
export function formValuesOf({ tree, recipe, pieces, ...detail }: KnownTree, massUnit: MassUnit): TreeFormValues {
  return {
    tag: tree.tag,
    recipeVersionId: recipe.versionId,
    placeId: tree.place.id,
    pieces: pieces.map((piece) => ({
      workTitle: piece.workTitle,
      sectionName: piece.sectionName,
      editionNumber: String(piece.editionNumber),
      isRecast: piece.isRecast,
    })),
    waxMassKg: typedText(detail.waxMassKg, massUnit),
    cupKind: detail.cupKind,
    cupVolumeL: String(detail.cupVolumeL),
    recessClass: detail.recessClass,
    spacing: detail.spacing,
    hungMassKg: detail.hungMassKg === null ? '' : typedText(detail.hungMassKg, massUnit),
    pourDate: tree.pourDate ?? '',
  }
}

/** What was typed, with the fields that stand put back as they are: a fixed field is not in the form, or was tampered with. */
export function keepFixed(typed: TreeFormValues, stored: TreeFormValues, fixed: FixedFields): TreeFormValues {
  const standing = Object.fromEntries(Object.entries(stored).filter(([field]) => field in fixed))
  return { ...typed, ...standing }
}
