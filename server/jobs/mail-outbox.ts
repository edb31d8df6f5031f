import { randomUUID } from 'node:crypto'
import { createTransport, type Transporter } from 'nodemailer'
import { Op } from 'sequelize'
import type { Logger } from 'pino'
import type { Config } from '../config.ts'
import { OutboxMail } from '../models/outbox-mail.ts'
import type { Job } from './job.ts'

const LOOK_EVERY_MS = 2_000
const MOST_ATTEMPTS = 12
const FIRST_WAIT_MS = 5_000
const LONGEST_WAIT_MS = 3_600_000
/** A claim of an instance that died is free again after this; the stable Message-ID lets the receiver know a repeat. */
const CLAIM_LASTS_MS = 120_000

/** Takes one mail that is due by a guarded update that is committed before anything is sent, so that no two instances send it. */
async function claim(instance: string, now: Date): Promise<OutboxMail | null> {
  const stale = new Date(now.getTime() - CLAIM_LASTS_MS)
  const due = await OutboxMail.findOne({
    where: {
      [Op.or]: [
        { state: 'waiting', nextAttemptAt: { [Op.lte]: now } },
        { state: 'claimed', claimedAt: { [Op.lt]: stale } },
      ],
    },
    order: [['nextAttemptAt', 'ASC']],
  })
  if (!due) return null
  const where = { id: due.id, state: due.state, attempts: due.attempts }
  const [taken] = await OutboxMail.update({ state: 'claimed', claimedBy: instance, claimedAt: now, attempts: due.attempts + 1 }, { where })
  return taken === 1 ? due.reload() : null
}

async function send(mail: OutboxMail, transport: Transporter, from: string): Promise<void> {
  const { recipients, subject, text, messageId } = mail
  try {
    await transport.sendMail({ from, to: recipients, subject, text, messageId })
    await mail.update({ state: 'sent', sentAt: new Date(), lastProblem: null })
  } catch (error) {
    const wait = Math.min(LONGEST_WAIT_MS, FIRST_WAIT_MS * 2 ** (mail.attempts - 1))
    const state = mail.attempts >= MOST_ATTEMPTS ? 'failed' : 'waiting'
    await mail.update({
      state,
      nextAttemptAt: new Date(Date.now() + wait),
      lastProblem: (error instanceof Error ? error.message : String(error)).slice(0, 500),
    })
  }
}

/** Sends everything that is due, one after the other. */
export async function deliverDueMail(transport: Transporter, from: string, instance: string): Promise<number> {
  let sent = 0
  for (;;) {
    const mail = await claim(instance, new Date())
    if (!mail) return sent
    await send(mail, transport, from)
    sent++
  }
}

/** Looks for due mail every two seconds. */
export function startMailOutbox(smtp: NonNullable<Config['smtp']>, from: string, logger: Logger): Job {
  const { host, port, isSecure, user, password } = smtp
  const transport = createTransport({
    host,
    port,
    secure: isSecure,
    ...(user === undefined ? {} : { auth: { user, pass: password ?? '' } }),
  })
  const instance = randomUUID()
  let isStopped = false
  let running: Promise<unknown> = Promise.resolve()
  const timer = setInterval(() => {
    running = running.then(async () => {
      if (isStopped) return
      try {
        await deliverDueMail(transport, from, instance)
      } catch (error) {
        logger.error({ err: error }, 'The mail outbox could not be worked through; it is tried again.')
      }
    })
  }, LOOK_EVERY_MS)
  return {
    stop: async () => {
      isStopped = true
      clearInterval(timer)
      await running
      transport.close()
    },
  }
}
