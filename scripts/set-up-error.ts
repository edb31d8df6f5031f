/** Something that a person has to put right before Scruple can start; the message is one sentence for them. */
export class SetUpError extends Error {
  override readonly name = 'SetUpError'
}
