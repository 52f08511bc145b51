const CAUTION =
  'Not an approved training device, not for operational use. The approved flight manual and licensed instruction govern.';

/** Subject and text of an invitation. */
export function invitationText(to: {
  name: string;
  organisation: string;
  inviter: string;
  link: string;
  days: number;
}) {
  return {
    subject: `Invitation from ${to.organisation}`,
    text: [
      `${to.name},`,
      '',
      `${to.inviter} invites you to Sidewash at ${to.organisation}. Choose a password here:`,
      '',
      to.link,
      '',
      `The link works once and for ${to.days} days. If you did not expect it, leave it.`,
      '',
      CAUTION,
    ].join('\n'),
  };
}

/** Subject and text of a password reset. */
export function resetText(to: { name: string; link: string; hours: number }) {
  return {
    subject: 'A new password',
    text: [
      `${to.name},`,
      '',
      'someone, probably you, asked for a new password. Choose it here:',
      '',
      to.link,
      '',
      `The link works once and for ${to.hours} hours. If it was not you, nothing has changed; leave it.`,
    ].join('\n'),
  };
}
