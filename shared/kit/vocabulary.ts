export const KIND_CATEGORIES = ['vessel', 'instrument', 'transfer', 'closure', 'heating', 'other'] as const
export type KindCategory = (typeof KIND_CATEGORIES)[number]

/** `in-service`: may be lent. `repair`: off the shelf for now. `retired`, `lost`: gone for good, history kept. */
export const ITEM_STATUSES = ['in-service', 'repair', 'retired', 'lost'] as const
export type ItemStatus = (typeof ITEM_STATUSES)[number]

/** `sanitised` runs out; when it has, the item is only clean. */
export const HYGIENE_STATES = ['dirty', 'clean', 'sanitised'] as const
export type HygieneState = (typeof HYGIENE_STATES)[number]

/** `minor`: works, keep an eye on it. `major`: does not do its job. `danger`: may hurt someone; always blocks. */
export const FAULT_SEVERITIES = ['minor', 'major', 'danger'] as const
export type FaultSeverity = (typeof FAULT_SEVERITIES)[number]

/** The history of an item, one word for each thing that can happen to it. */
export const ITEM_EVENTS = [
  'added',
  'changed',
  'status-changed',
  'hygiene-recorded',
  'became-wild',
  'no-longer-wild',
  'fault-reported',
  'fault-resolved',
  'calibrated',
  'photo-added',
  'photo-removed',
  'checked-out',
  'checked-in',
] as const
export type ItemEvent = (typeof ITEM_EVENTS)[number]
