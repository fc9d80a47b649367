import type { IconName } from './icons.ts'

export const TONES = ['barm', 'sound', 'warn', 'fault', 'sloe', 'quiet'] as const
/** Good, soon, wrong, wild, or plain. Must is no state: it is liquid and forecast. */
export type Tone = (typeof TONES)[number]

interface State {
  word: string
  icon: IconName
  tone: Tone
}

/** Every state that a mark can show: always a word, an icon and a colour together. */
export const STATES = {
  'loan-requested': { word: 'Asked for', icon: 'wait', tone: 'barm' },
  'loan-approved': { word: 'Approved', icon: 'approved', tone: 'barm' },
  'loan-out': { word: 'Out', icon: 'pass', tone: 'barm' },
  'loan-returned': { word: 'Back', icon: 'check', tone: 'sound' },
  'loan-declined': { word: 'Declined', icon: 'declined', tone: 'quiet' },
  'loan-cancelled': { word: 'Cancelled', icon: 'close', tone: 'quiet' },
  'loan-lapsed': { word: 'Not collected', icon: 'clock', tone: 'quiet' },
  'loan-collect': { word: 'Collect', icon: 'collect', tone: 'barm' },
  'loan-bring-back': { word: 'Bring back', icon: 'return', tone: 'warn' },
  'loan-due-today': { word: 'Due back today', icon: 'return', tone: 'barm' },
  'loan-overdue': { word: 'Overdue', icon: 'overdue', tone: 'fault' },
  'loan-at-risk': { word: 'At risk', icon: 'at-risk', tone: 'fault' },
  'loan-waiting': { word: 'In line', icon: 'wait', tone: 'quiet' },

  'item-in-service': { word: 'In service', icon: 'pass', tone: 'sound' },
  'item-repair': { word: 'In repair', icon: 'repair', tone: 'warn' },
  'item-retired': { word: 'Retired', icon: 'declined', tone: 'quiet' },
  'item-lost': { word: 'Lost', icon: 'lost', tone: 'fault' },
  'item-fault': { word: 'Out of service', icon: 'damaged', tone: 'fault' },
  'item-fault-minor': { word: 'Has a fault', icon: 'damaged', tone: 'warn' },

  'hygiene-dirty': { word: 'Needs washing', icon: 'wash', tone: 'warn' },
  'hygiene-clean': { word: 'Clean', icon: 'clean', tone: 'sound' },
  'hygiene-sanitised': { word: 'Sanitised', icon: 'sanitised', tone: 'sound' },
  'hygiene-wild': { word: 'Wild', icon: 'wild', tone: 'sloe' },

  'kind-free': { word: 'Free', icon: 'pass', tone: 'sound' },
  'kind-last': { word: 'The last one', icon: 'notice', tone: 'warn' },
  'kind-none': { word: 'None', icon: 'none', tone: 'fault' },
  'kind-induction': { word: 'Needs induction', icon: 'induction', tone: 'quiet' },
  'kind-at-once': { word: 'Yours at once', icon: 'approved', tone: 'barm' },

  'stock-enough': { word: 'Enough', icon: 'pass', tone: 'sound' },
  'stock-low': { word: 'Running low', icon: 'falling', tone: 'warn' },
  'stock-none': { word: 'None left', icon: 'none', tone: 'fault' },
  'stock-near-date': { word: 'Nearing its date', icon: 'wait', tone: 'warn' },
  'stock-past-date': { word: 'Past its date', icon: 'clock', tone: 'fault' },

  'yeast-good': { word: 'Good', icon: 'pass', tone: 'sound' },
  'yeast-pitch-more': { word: 'Pitch more', icon: 'more-yeast', tone: 'warn' },
  'yeast-prove-first': { word: 'Prove it first', icon: 'reading', tone: 'warn' },
  'yeast-do-not-rely': { word: 'Don’t rely on it', icon: 'hold', tone: 'fault' },

  'gate-ready': { word: 'Ready', icon: 'pass', tone: 'sound' },
  'gate-not-yet': { word: 'Not yet', icon: 'hold', tone: 'fault' },
} as const satisfies Record<string, State>

export type StateName = keyof typeof STATES
