import { z } from 'zod'
import { ACCEPTANCE_STANDARDS } from '../vocabulary.ts'
import { Id, Version } from './field.ts'
import { CapsuleSizeName, changeFields, code, figure, words } from './master-fields.ts'

const fillMg = figure({ min: 1, max: 5_000, decimals: 3, unit: 'mg' })

const productFields = {
  code: code(30),
  name: words(120),
  capsuleSize: CapsuleSizeName,
  targetFillMg: fillMg,
  lowerSpecificationMg: fillMg,
  upperSpecificationMg: fillMg,
  labelClaims: z
    .array(z.strictObject({ active: words(120), claimMg: figure({ min: 0.001, max: 5_000, decimals: 3, unit: 'mg' }) }))
    .min(1, 'Name at least one active and its claim.')
    .max(20),
  acceptanceStandards: z.array(z.enum(ACCEPTANCE_STANDARDS)).min(1, 'Choose at least one acceptance standard.'),
  isActive: z.boolean(),
}

interface Figures {
  targetFillMg: number
  lowerSpecificationMg: number
  upperSpecificationMg: number
  labelClaims: readonly { active: string; claimMg: number }[]
  acceptanceStandards: readonly string[]
}

function checkProduct(product: Figures, context: z.RefinementCtx): void {
  const refuse = (path: (string | number)[], message: string): void => {
    context.addIssue({ code: 'custom', path, message })
  }
  if (product.lowerSpecificationMg >= product.targetFillMg)
    refuse(['lowerSpecificationMg'], 'The lower specification must lie below the target.')
  if (product.upperSpecificationMg <= product.targetFillMg)
    refuse(['upperSpecificationMg'], 'The upper specification must lie above the target.')
  const names = product.labelClaims.map(({ active }) => active.toLowerCase())
  for (const [place, name] of names.entries()) {
    if (names.indexOf(name) < place) refuse(['labelClaims', place, 'active'], 'This active is in the list already.')
  }
  const claimed = product.labelClaims.reduce((sum, { claimMg }) => sum + claimMg, 0)
  if (claimed > product.targetFillMg) refuse(['labelClaims'], 'The claims together are heavier than the target fill.')
  if (new Set(product.acceptanceStandards).size < product.acceptanceStandards.length)
    refuse(['acceptanceStandards'], 'Name each standard once.')
}

export const CreateProduct = z
  .strictObject({ siteId: Id, ...productFields })
  .superRefine(checkProduct)
  .meta({ id: 'CreateProduct', description: 'What is filled: target, specification, label claims, acceptance standards.' })
export type CreateProduct = z.output<typeof CreateProduct>

export const UpdateProduct = z
  .strictObject({ ...productFields, ...changeFields })
  .superRefine(checkProduct)
  .meta({ id: 'UpdateProduct', description: 'A product as it shall be, the version that was seen, and why.' })
export type UpdateProduct = z.output<typeof UpdateProduct>

export const ProductAnswer = z
  .object({
    id: Id,
    siteId: Id,
    code: z.string(),
    name: z.string(),
    capsuleSize: z.string(),
    targetFillMg: z.number(),
    lowerSpecificationMg: z.number(),
    upperSpecificationMg: z.number(),
    labelClaims: z.array(z.object({ active: z.string(), claimMg: z.number() })),
    acceptanceStandards: z.array(z.enum(ACCEPTANCE_STANDARDS)),
    isActive: z.boolean(),
    hasBatches: z.boolean(),
    /** The approved control plan, or null where there is none: then no batch can be planned. */
    approvedPlanVersion: z.int().nullable(),
    version: Version,
  })
  .meta({ id: 'Product', description: 'What is filled, and how it will be judged.' })
export type ProductAnswer = z.output<typeof ProductAnswer>

export const ProductId = z.object({ productId: Id })
