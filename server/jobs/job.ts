/** Something that runs beside the requests until it is stopped. */
export interface Job {
  stop(): Promise<void>
}
