import type { Sequelize } from 'sequelize'
import { defineAuditChain } from './audit-chain.ts'
import { defineAuditEntry } from './audit-entry.ts'
import { defineBalance } from './balance.ts'
import { defineBalanceCheck } from './balance-check.ts'
import { defineBatch } from './batch.ts'
import { defineChangeover } from './changeover.ts'
import { defineChangeoverReading } from './changeover-reading.ts'
import { defineChangeoverStep } from './changeover-step.ts'
import { defineControlPlan } from './control-plan.ts'
import { defineDeviation } from './deviation.ts'
import { defineDisposition } from './disposition.ts'
import { defineIdempotencyKey } from './idempotency-key.ts'
import { defineLiveEvent } from './live-event.ts'
import { defineMachine } from './machine.ts'
import { defineMachineEvent } from './machine-event.ts'
import { defineOutboxMail } from './outbox-mail.ts'
import { defineProduct } from './product.ts'
import { defineReview } from './review.ts'
import { defineReviewAction } from './review-action.ts'
import { defineSample } from './sample.ts'
import { defineSession } from './session.ts'
import { defineShellLot } from './shell-lot.ts'
import { defineShellWeight } from './shell-weight.ts'
import { defineSignInThrottle } from './sign-in-throttle.ts'
import { defineSignal } from './signal.ts'
import { defineSignature } from './signature.ts'
import { defineSite } from './site.ts'
import { defineToolingPart } from './tooling-part.ts'
import { defineToolingSet } from './tooling-set.ts'
import { defineUser } from './user.ts'
import { defineUserRole } from './user-role.ts'
import { defineWeighing } from './weighing.ts'
import { defineWeighingCorrection } from './weighing-correction.ts'
import { defineWeighingFile } from './weighing-file.ts'
import { defineWeighingFileChunk } from './weighing-file-chunk.ts'

const definitions = [
  defineAuditChain,
  defineAuditEntry,
  defineBalance,
  defineBalanceCheck,
  defineBatch,
  defineChangeover,
  defineChangeoverReading,
  defineChangeoverStep,
  defineControlPlan,
  defineDeviation,
  defineDisposition,
  defineIdempotencyKey,
  defineLiveEvent,
  defineMachine,
  defineMachineEvent,
  defineOutboxMail,
  defineProduct,
  defineReview,
  defineReviewAction,
  defineSample,
  defineSession,
  defineShellLot,
  defineShellWeight,
  defineSignInThrottle,
  defineSignal,
  defineSignature,
  defineSite,
  defineToolingPart,
  defineToolingSet,
  defineUser,
  defineUserRole,
  defineWeighing,
  defineWeighingCorrection,
  defineWeighingFile,
  defineWeighingFileChunk,
]

/** Binds every model to this connection. */
export function defineModels(sequelize: Sequelize): void {
  for (const define of definitions) define(sequelize)
}
