import { createHash } from 'node:crypto'
import { passPhrasePool } from '../../workers/pass-phrase-pool.ts'

/** 2^12 rounds, about a third of a second of one core; stored with the hash and raised at the next sign-in. */
const COST = 12
const SCHEME = /^bcrypt-sha256\$(\d+)\$(.+)$/

/** bcrypt reads 72 bytes, so the NFC text is hashed first; base64 keeps zero bytes out. */
function preHash(passPhrase: string): string {
  return createHash('sha256').update(passPhrase.normalize('NFC')).digest('base64')
}

/** A stored hash: scheme, cost and bcrypt's own text. */
export async function hashPassPhrase(passPhrase: string): Promise<string> {
  return `bcrypt-sha256$${COST}$${await passPhrasePool().hash(preHash(passPhrase), COST)}`
}

/** Whether the pass-phrase belongs to the stored hash, and whether that hash is weaker than today's. */
export async function verifyPassPhrase(passPhrase: string, stored: string): Promise<{ isRight: boolean; needsUpgrade: boolean }> {
  const [, cost, hash] = SCHEME.exec(stored) ?? []
  if (hash === undefined) return { isRight: false, needsUpgrade: false }
  return { isRight: await passPhrasePool().compare(preHash(passPhrase), hash), needsUpgrade: Number(cost) < COST }
}

/** Costs as much as a real comparison, so that an unknown account cannot be told from a wrong pass-phrase by the clock. */
export async function pretendToVerify(passPhrase: string): Promise<void> {
  await passPhrasePool().compare(preHash(passPhrase), UNMATCHABLE_HASH)
}

/** bcrypt of random bytes that were thrown away, at the cost above. */
const UNMATCHABLE_HASH = '$2b$12$Ah7wr9R9ZkpSitOruDUZCu3/YagbdQGqF1DPW5gDw6zY2JLHyzUZi'
