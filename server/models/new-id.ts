import { v7 } from 'uuid'

/** A new identifier (RFC 9562 version 7): sorted by time, so that rows that belong together lie together on disk. */
export function newId(): string {
  return v7()
}
