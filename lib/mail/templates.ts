/** The mails that Emberstave writes, in plain text: who, what, one link, until when, what if it was not you. */

export type MailText = { subject: string; text: string }

function lines(...paragraphs: readonly string[]): string {
  return `${paragraphs.join('\n\n')}\n`
}

/** To a person whom an administrator has invited. `until` is written out in the site's time zone. */
export function invitationMail(input: {
  siteName: string
  personName: string
  inviterName: string
  roleName: string
  link: string
  until: string
}): MailText {
  return {
    subject: `Your account at ${input.siteName}`,
    text: lines(
      `Dear ${input.personName},`,
      `${input.inviterName} has made an account for you in Emberstave at ${input.siteName}, as ${input.roleName}.`,
      `Choose your password here:\n${input.link}`,
      `The link serves once, until ${input.until}. After that, ask ${input.inviterName} for a new one.`,
      'If you did not expect this, leave it alone; without a password nobody can sign in.',
    ),
  }
}

/** To a person who asked to choose a new password. */
export function passwordResetMail(input: {
  siteName: string
  personName: string
  link: string
  until: string
}): MailText {
  return {
    subject: `A new password at ${input.siteName}`,
    text: lines(
      `Dear ${input.personName},`,
      `Somebody, probably you, asked for a new password in Emberstave at ${input.siteName}. Choose it here:\n${input.link}`,
      `The link serves once, until ${input.until}. Choosing a password ends every open session of yours.`,
      'If you did not ask, leave this alone: your password stays as it is. If it happens again, tell your administrator.',
    ),
  }
}

/** To a person whose password was changed, so that a change by somebody else is noticed. */
export function passwordChangedMail(input: {
  siteName: string
  personName: string
  at: string
  link: string
}): MailText {
  return {
    subject: `Your password at ${input.siteName} was changed`,
    text: lines(
      `Dear ${input.personName},`,
      `Your password in Emberstave at ${input.siteName} was changed on ${input.at}. Your other sessions have ended.`,
      `If that was not you, choose a new one at once and tell your administrator:\n${input.link}`,
    ),
  }
}

/** To each master cooper who may approve a version that was sent for review. */
export function versionSentForReviewMail(input: {
  siteName: string
  personName: string
  authorName: string
  recipeName: string
  versionNumber: number
  link: string
}): MailText {
  return {
    subject: `To approve: ${input.recipeName}, version ${input.versionNumber}`,
    text: lines(
      `Dear ${input.personName},`,
      `${input.authorName} has sent version ${input.versionNumber} of ${input.recipeName} for review at ${input.siteName}.`,
      `Read it, then approve or return it:\n${input.link}`,
    ),
  }
}
