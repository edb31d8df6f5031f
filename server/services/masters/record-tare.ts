import { readFile } from 'node:fs/promises'
import { FEWEST_SHELLS, MOST_SHELLS, type RecordTare, type RecordTareFile, type ShellLotDetail } from '#shared/schemas/shell-lots.ts'
import { capsuleSize } from '#shared/trade/capsule-sizes.ts'
import { summarise } from '#shared/statistics/summary.ts'
import { inTransaction } from '../../database/in-transaction.ts'
import { InvalidFieldError } from '../../errors.ts'
import type { Actor } from '../../http/actor.ts'
import type { UploadedFile } from '../../http/endpoint.ts'
import { ShellLot } from '../../models/shell-lot.ts'
import { ShellWeight } from '../../models/shell-weight.ts'
import { findMaster, noteMaster } from './master-record.ts'
import { detailOf } from './shell-lots.ts'
import { readTareFile } from './tare-file.ts'

/** Half and twice the weight of the trade's shells: beyond it the size, the unit or the capsule (filled?) is wrong. */
const PLAUSIBLE = { from: 0.5, to: 2 } as const

function requirePlausible(lot: ShellLot, weightsMg: readonly number[]): void {
  const typical = capsuleSize(lot.capsuleSize)?.typicalShells.map(({ mg }) => mg)
  if (!typical) return
  const from = Math.min(...typical) * PLAUSIBLE.from
  const to = Math.max(...typical) * PLAUSIBLE.to
  const place = weightsMg.findIndex((weight) => weight < from || weight > to)
  if (place < 0) return
  const weight = weightsMg[place] ?? 0
  throw new InvalidFieldError(
    `/weightsMg/${place}`,
    `Shell ${place + 1} weighs ${weight} mg; an empty shell of size ${lot.capsuleSize} weighs between ${from} and ${to} mg.`,
  )
}

/** Stores weighed shells as the next tare of the lot. Earlier tares stay as they are, and so does every sample that used them. */
export async function recordTare(actor: Actor, shellLotId: string, { weightsMg }: RecordTare): Promise<ShellLotDetail> {
  return inTransaction(async () => {
    const lot = await findMaster(ShellLot, actor, { permission: 'shell-lot:write', kind: 'shell lot', id: shellLotId, isLocked: true })
    requirePlausible(lot, weightsMg)
    const { n, mean, sd } = summarise(weightsMg)
    const old = { tareVersion: lot.tareVersion, tareN: lot.tareN, tareMeanMg: lot.tareMeanMg, tareSdMg: lot.tareSdMg }
    const tareVersion = lot.tareVersion + 1
    const tare = { tareVersion, tareN: n, tareMeanMg: mean, tareSdMg: sd }
    await ShellWeight.bulkCreate(weightsMg.map((weightMg, place) => ({ shellLotId, tareVersion, ordinal: place + 1, weightMg })))
    await lot.update({ ...tare, tareWeighedAt: new Date(), version: lot.version + 1 })
    await noteMaster(actor, {
      siteId: lot.siteId,
      action: 'shell-lot:tare',
      record: { kind: 'shell-lot', id: shellLotId },
      old,
      new: { ...tare, weightsMg },
    })
    await lot.reload()
    return detailOf(lot)
  })
}

/** The same from a CSV of one column; a file with anything wrong in it is refused as a whole. */
export async function recordTareFile(
  actor: Actor,
  shellLotId: string,
  file: UploadedFile | undefined,
  form: RecordTareFile,
): Promise<ShellLotDetail> {
  if (!file) throw new InvalidFieldError('/file', 'Send the file in the field “file”.')
  await findMaster(ShellLot, actor, { permission: 'shell-lot:write', kind: 'shell lot', id: shellLotId })
  const weightsMg = await readTareFile(await readFile(file.path), form)
  if (weightsMg.length < FEWEST_SHELLS || weightsMg.length > MOST_SHELLS) {
    throw new InvalidFieldError(
      '/file',
      `The file holds ${weightsMg.length} weights; from ${FEWEST_SHELLS} to ${MOST_SHELLS} are expected.`,
    )
  }
  return recordTare(actor, shellLotId, { weightsMg })
}
