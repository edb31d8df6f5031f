import { StaleVersionError } from '../errors.ts'

/**
 * Refuses to change a record of which the caller saw another version. The record must be locked by the caller's
 * transaction; the caller then saves `version + 1`.
 */
export function requireVersion(kind: string, record: { version: number; toJSON(): object }, yourVersion: number): void {
  if (record.version === yourVersion) return
  throw new StaleVersionError(kind, { yourVersion, currentVersion: record.version, current: record.toJSON() })
}
