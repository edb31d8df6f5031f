import { newId } from '../models/new-id.ts'
import { OutboxMail } from '../models/outbox-mail.ts'
import { User } from '../models/user.ts'
import { UserRole } from '../models/user-role.ts'
import type { Role } from '#shared/permissions.ts'

export interface MailDraft {
  siteId: string
  role: Role
  subject: string
  text: string
  signalId: string
}

/** One line: a name or reason that holds a line break could add a header of its own (requirement E34). */
const oneLine = (text: string): string => text.replace(/[\r\n]+/g, ' ').slice(0, 200)

/** Puts a mail to everybody of a role at the site into the outbox, in the caller's transaction; the mail job sends it. */
export async function enqueueMail({ siteId, role, subject, text, signalId }: MailDraft): Promise<void> {
  const holders = await UserRole.findAll({ where: { siteId, role } })
  const users = await User.findAll({ where: { id: holders.map(({ userId }) => userId), isActive: true } })
  if (users.length === 0) return
  const now = new Date()
  await OutboxMail.create({
    siteId,
    recipients: users.map(({ email }) => oneLine(email)),
    subject: oneLine(subject),
    text,
    nextAttemptAt: now,
    messageId: `<${newId()}@scruple>`,
    signalId,
    createdAt: now,
  })
}
