import { Weighing } from '../../models/weighing.ts'
import { WeighingCorrection } from '../../models/weighing-correction.ts'

/** A weighing with everything that was later said of it, oldest first. */
export interface CurrentWeighing {
  first: Weighing
  corrections: WeighingCorrection[]
  /** The newest version: what counts. */
  grossMg: number | null
  shellMg: number | null
  netMg: number | null
  position: number | null
}

/** The capsules of a sample in order, each as it stands now; the first reading stays beside it. */
export async function currentWeighings(sampleId: string): Promise<CurrentWeighing[]> {
  const weighings = await Weighing.findAll({ where: { sampleId }, order: [['ordinal', 'ASC']] })
  const corrections = await WeighingCorrection.findAll({ where: { sampleId }, order: [['version', 'ASC']] })
  return weighings.map((first) => {
    const own = corrections.filter(({ ordinal }) => ordinal === first.ordinal)
    const { grossMg, shellMg, netMg, position } = own.at(-1) ?? first
    return { first, corrections: own, grossMg, shellMg, netMg, position }
  })
}
