import { Op } from 'sequelize'
import {
  ReviewFigures,
  type AddReviewAction,
  type CloseReviewAction,
  type ReviewActionAnswer,
  type ReviewAnswer,
} from '#shared/schemas/review.ts'
import { inTransaction } from '../../database/in-transaction.ts'
import { ConflictError, NotFoundError } from '../../errors.ts'
import { requirePermission, type Actor } from '../../http/actor.ts'
import { Review } from '../../models/review.ts'
import { ReviewAction } from '../../models/review-action.ts'
import { readWeek } from '../../reads/weekly-review.ts'
import { appendAudit, chainOf } from '../audit.ts'
import { requireVersion } from '../require-version.ts'
import { userNames } from '../user-names.ts'

function presentAction({ id, week, title, owner, dueOn, state, effect, version }: ReviewAction): ReviewActionAnswer {
  return { id, week, title, owner, dueOn, state, effect, version }
}

/** What the meeting of a week looks at: everything still open, and what was raised or closed with it. */
async function actionsFor(siteId: string, week: string): Promise<ReviewActionAnswer[]> {
  const actions = await ReviewAction.findAll({
    where: { siteId, week: { [Op.lte]: week }, [Op.or]: [{ state: 'open' }, { week }] },
    order: [
      ['state', 'ASC'],
      ['dueOn', 'ASC'],
    ],
  })
  return actions.map(presentAction)
}

/** The week as the meeting sees it: frozen figures where they were frozen, else as they are now. */
export async function readReview(actor: Actor, siteId: string, week: string): Promise<ReviewAnswer> {
  requirePermission(actor, 'record:read', { siteId, kind: 'site', id: siteId })
  const frozen = await Review.findOne({ where: { siteId, week } })
  const names = await userNames([frozen?.frozenById ?? null])
  return {
    figures: frozen ? ReviewFigures.parse(frozen.figures) : await readWeek(siteId, week),
    frozenAt: frozen?.frozenAt.toISOString() ?? null,
    frozenBy: frozen ? (names.get(frozen.frozenById) ?? '') : null,
    actions: await actionsFor(siteId, week),
  }
}

/** Keeps the figures of a week for good: opened again a month later they are the same. */
export async function freezeReview(actor: Actor, siteId: string, week: string): Promise<ReviewAnswer> {
  requirePermission(actor, 'review:freeze', { siteId, kind: 'site', id: siteId })
  await inTransaction(async () => {
    if (await Review.findOne({ where: { siteId, week } }))
      throw new ConflictError('review-frozen', `The figures of ${week} are frozen already.`)
    const figures = await readWeek(siteId, week)
    const review = await Review.create({ siteId, week, figures, frozenAt: new Date(), frozenById: actor.userId })
    await appendAudit({
      actor,
      chain: chainOf.reviews(siteId),
      action: 'review:freeze',
      record: { kind: 'review', id: review.id },
      new: { week },
    })
  })
  return readReview(actor, siteId, week)
}

/** Adds an action; it is carried over from week to week until it is closed. */
export async function addAction(actor: Actor, week: string, { siteId, ...request }: AddReviewAction): Promise<ReviewActionAnswer> {
  requirePermission(actor, 'review:act', { siteId, kind: 'site', id: siteId })
  return inTransaction(async () => {
    const action = await ReviewAction.create({ ...request, siteId, week, createdById: actor.userId })
    await appendAudit({
      actor,
      chain: chainOf.reviews(siteId),
      action: 'review:add-action',
      record: { kind: 'review-action', id: action.id },
      new: { week, ...request },
    })
    return presentAction(action)
  })
}

/** Closes an action and says whether it helped. */
export async function closeAction(actor: Actor, id: string, { version, state, effect }: CloseReviewAction): Promise<ReviewActionAnswer> {
  return inTransaction(async () => {
    const action = await ReviewAction.findByPk(id, { lock: true })
    if (!action) throw new NotFoundError('action', id)
    requirePermission(actor, 'review:act', { siteId: action.siteId, kind: 'action', id })
    requireVersion('action', action, version)
    if (action.state !== 'open') throw new ConflictError('action-closed', 'This action is closed already.')
    await action.update({ state, effect, closedAt: new Date(), version: version + 1 })
    await appendAudit({
      actor,
      chain: chainOf.reviews(action.siteId),
      action: 'review:close-action',
      record: { kind: 'review-action', id },
      new: { state, effect },
    })
    return presentAction(action)
  })
}
