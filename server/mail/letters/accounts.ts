import type { Draft } from './letter.ts'

type Path = `/${string}`

/** Letters about a person's account. A link's secret stands in the text only, never in the subject. */
export const ACCOUNT_DRAFTS = {
  'account-invitation': ({ path, by }: { path: Path; by: string }): Draft => ({
    subject: 'You are invited to share our brewing kit',
    paragraphs: [
      `${by} invites you to our brewing space: its kit, its yeast fridge and its larder.`,
      'Choose a password and you are in. The link works once, for three days. Not expecting this? Leave it, and nothing happens.',
    ],
    act: { label: 'Join the space', path },
  }),
  'account-first-admin': ({ path }: { path: Path }): Draft => ({
    subject: 'Set up your brewing space',
    paragraphs: ['You are the first admin here. The link works once, for one day.'],
    act: { label: 'Set up the space', path },
  }),
  'account-declined': ({ reason }: { reason: string }): Draft => ({
    subject: 'About your request to join',
    paragraphs: ['We cannot take you in just now.', reason],
  }),
  'account-reset': ({ path }: { path: Path }): Draft => ({
    subject: 'Choose a new password',
    paragraphs: [
      'Somebody, we hope you, asked for a new password. The link works once, for half an hour.',
      'If it was not you, leave this letter: your password stays as it is.',
    ],
    act: { label: 'Choose a new password', path },
  }),
  'account-password-changed': (): Draft => ({
    subject: 'Your password was changed',
    paragraphs: [
      'Your password was changed just now, and your other browsers were signed out.',
      'If it was not you, choose a new one straight away and tell a steward.',
    ],
    act: { label: 'Choose a new password', path: '/forgotten' },
  }),
  'account-email-confirm': ({ path }: { path: Path }): Draft => ({
    subject: 'Confirm your new e-mail address',
    paragraphs: ['Use this link to make this your address with us. It works once, for a day.'],
    act: { label: 'Confirm this address', path },
  }),
  'account-email-asked': (): Draft => ({
    subject: 'Your e-mail address is about to change',
    paragraphs: [
      'Somebody, we hope you, asked to move your account to another e-mail address. We sent that address a link to confirm it.',
      'If it was not you, change your password now and tell a steward.',
    ],
    act: { label: 'Look at your account', path: '/me' },
  }),
  'account-leaving': ({ day }: { day: string }): Draft => ({
    subject: 'Your account will be erased',
    paragraphs: [
      `You asked to leave. On ${day} your name, address and notes are erased for good; the counts in the kit’s history stay.`,
      'Changed your mind? Ask an admin to bring the account back before that day.',
    ],
  }),
}

export type AccountKind = keyof typeof ACCOUNT_DRAFTS
export type AccountFacts = { [K in AccountKind]: Parameters<(typeof ACCOUNT_DRAFTS)[K]>[0] }
