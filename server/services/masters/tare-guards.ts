import type { TareGuardAnswer } from '#shared/schemas/shell-lots.ts'
import { tareGuard } from '#shared/trade/tare-guard.ts'
import { Op } from 'sequelize'
import { Batch } from '../../models/batch.ts'
import { Product } from '../../models/product.ts'
import { Sample } from '../../models/sample.ts'
import type { ShellLot } from '../../models/shell-lot.ts'

/** Enough for an SD to within some per cent, few enough to be about the process of today. */
const LAST_SAMPLES = 50

interface FillScatter {
  sdMg: number | null
  samples: number
}

/** The fill's own variance in one sample; where one mean tare was taken off, the shells' variance is taken off again. */
function fillVariance({ basis, sdMg, tareSdMg }: Sample): number {
  const variance = (sdMg ?? 0) ** 2
  return basis === 'net-individual' ? variance : variance - (tareSdMg ?? 0) ** 2
}

async function fillScatterOf(productId: string): Promise<FillScatter> {
  const batches = await Batch.findAll({ where: { productId }, attributes: ['id'], order: [['startedAt', 'DESC']], limit: LAST_SAMPLES })
  if (batches.length === 0) return { sdMg: null, samples: 0 }
  const samples = await Sample.findAll({
    where: { batchId: batches.map(({ id }) => id), state: 'complete', sdMg: { [Op.not]: null }, excludedReason: null },
    order: [['completedAt', 'DESC']],
    limit: LAST_SAMPLES,
  })
  const variance = samples.reduce((sum, sample) => sum + fillVariance(sample), 0) / Math.max(1, samples.length)
  return { sdMg: variance > 0 ? Math.sqrt(variance) : null, samples: samples.length }
}

/**
 * What the tare in force is good for: for each product of the lot's size whether one mean tare will do, and how far the
 * standard error of the tare may shift its mean.
 */
export async function tareGuards(lot: ShellLot): Promise<TareGuardAnswer[]> {
  const { siteId, capsuleSize, tareMeanMg, tareSdMg, tareN } = lot
  if (tareMeanMg === null || tareSdMg === null) return []
  const products = await Product.findAll({ where: { siteId, capsuleSize, isActive: true }, order: [['code', 'ASC']] })
  const guards: TareGuardAnswer[] = []
  for (const { id: productId, code: productCode, targetFillMg } of products) {
    const { sdMg: fillSdMg, samples } = await fillScatterOf(productId)
    const biasPercent = (100 * tareSdMg) / Math.sqrt(tareN) / targetFillMg
    const known = { productId, productCode, targetFillMg, fillSdMg, samples, biasPercent }
    const guard =
      fillSdMg === null ? undefined : tareGuard({ shellSdMg: tareSdMg, shellMeanMg: tareMeanMg, fillSdMg, fillMg: targetFillMg })
    guards.push({
      ...known,
      ratio: guard?.ratio ?? null,
      inflationPercent: guard?.inflationPercent ?? null,
      advice: guard?.advice ?? (targetFillMg < tareMeanMg ? 'individual-tare' : 'unknown'),
    })
  }
  return guards
}
