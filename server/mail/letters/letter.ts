/** What a letter says, before it is laid out. Words only: no markup, no address of a page outside `act`. */
export interface Draft {
  /** True on whichever day it is read: dates in full, never "tomorrow". */
  subject: string
  paragraphs: string[]
  /** Short facts, one a line: `['Bring back by', 'Friday 9 May 2031']`. */
  facts?: [name: string, value: string][]
  /** The one thing to do, as a page of this app. */
  act?: { label: string; path: `/${string}` }
}

export interface Recipient {
  name: string
  space: string
  /** Base of every link. */
  appUrl: string
}

export interface LaidOut {
  subject: string
  text: string
  html: string
}

/** Where the line that stops letters goes in, when the letter is sent. */
export const STOP_MARK = '<!--stop-->'

/** One source, two forms: plain text, and HTML that shows the same and loads nothing. */
export function layOut(draft: Draft, to: Recipient): LaidOut {
  const link = draft.act && `${to.appUrl}${draft.act.path}`
  const facts = draft.facts ?? []
  const text = [
    `Hello ${oneLine(to.name)},`,
    ...draft.paragraphs.map(tidy),
    ...(facts.length > 0 ? [facts.map(([name, value]) => `${name}: ${oneLine(value)}`).join('\n')] : []),
    ...(draft.act && link ? [`${draft.act.label}:\n${link}`] : []),
    to.space,
  ].join('\n\n')
  const html = [
    '<!doctype html><html lang="en-GB"><head><meta charset="utf-8"><title>',
    escapeHtml(oneLine(draft.subject)),
    '</title></head><body style="margin:0;padding:24px;background:#fbf8f2;color:#20292b;',
    'font:16px/1.5 sans-serif"><div style="max-width:560px">',
    `<p>Hello ${escapeHtml(oneLine(to.name))},</p>`,
    ...draft.paragraphs.map((words) => `<p>${escapeHtml(tidy(words)).replaceAll('\n', '<br>')}</p>`),
    ...(facts.length > 0 ? [factTable(facts)] : []),
    ...(draft.act && link
      ? [`<p><a href="${escapeHtml(link)}" style="color:#1c5f5a">${escapeHtml(draft.act.label)}</a></p>`]
      : []),
    `<p style="color:#566063;border-top:2px solid #cfc6b4;padding-top:8px">${escapeHtml(to.space)}</p>`,
    STOP_MARK,
    '</div></body></html>',
  ].join('')
  return { subject: cut(oneLine(draft.subject), 150), text: text + '\n', html }
}

/** Adds the way to stop letters like this one. */
export function withStopLink(letter: { text: string; html: string }, url: string) {
  const words = 'Not useful? Stop letters like this one'
  return {
    text: `${letter.text}\n${words}:\n${url}\n`,
    html: letter.html.replace(
      STOP_MARK,
      () => `<p style="font-size:14px"><a href="${escapeHtml(url)}" style="color:#566063">${words}</a></p>`,
    ),
  }
}

const factTable = (facts: [string, string][]) =>
  `<table style="border-collapse:collapse">${facts
    .map(
      ([name, value]) =>
        `<tr><th scope="row" style="text-align:left;font-weight:400;color:#566063;padding:2px 16px 2px 0;` +
        `vertical-align:top">${escapeHtml(name)}</th><td>${escapeHtml(oneLine(value))}</td></tr>`,
    )
    .join('')}</table>`

/** Headers end at a line break, so text from people loses its breaks, control and direction characters first. */
export const oneLine = (text: string) =>
  text
    .replace(/[\p{Cc}\p{Zl}\p{Zp}]+/gu, ' ')
    .replace(/[\p{Bidi_Control}]+/gu, '')
    .trim()

/** Keeps line breaks, drops every other control character. */
const tidy = (text: string) =>
  text
    .replace(/\r\n?/g, '\n')
    .replace(/[^\P{Cc}\n]+/gu, ' ')
    .replace(/[\p{Bidi_Control}]+/gu, '')

const cut = (text: string, length: number) => {
  const letters = Array.from(text)
  return letters.length <= length ? text : `${letters.slice(0, length - 1).join('')}…`
}

const ENTITIES: Record<string, string> = {
  '&': '&amp;',
  '<': '&lt;',
  '>': '&gt;',
  '"': '&quot;',
  "'": '&#39;',
}
const escapeHtml = (text: string) => text.replace(/[&<>"']/g, (char) => ENTITIES[char] ?? char)
