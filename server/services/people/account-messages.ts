import { cautionLines } from '../caution.ts';

/** Subject and text of an invitation. */
export function invitationText(to: {
  name: string;
  organisation: string;
  inviter: string;
  link: string;
  days: number;
  /** Words of the organisation below the fixed caution. */
  caution: string;
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
      ...cautionLines(to.caution),
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

/** Subject and text of the link that confirms a new address. */
export function addressText(to: { name: string; link: string; hours: number }) {
  return {
    subject: 'Your new address',
    text: [
      `${to.name},`,
      '',
      'someone, probably you, wants to sign in to Sidewash with this address. Confirm it here:',
      '',
      to.link,
      '',
      `The link works once and for ${to.hours} hours. If it was not you, nothing has changed; leave it.`,
    ].join('\n'),
  };
}

/** Subject and text for the address that was given up. */
export function addressChangedText(to: { name: string; after: string }) {
  return {
    subject: 'Your address has changed',
    text: [
      `${to.name},`,
      '',
      `you sign in to Sidewash with ${to.after} from now on; this address does not work any more.`,
      '',
      'If it was not you, tell your administrator at once.',
    ].join('\n'),
  };
}
