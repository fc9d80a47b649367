import { createTransport } from 'nodemailer'
import { oneLine } from './letters/letter.ts'
import { SendError, type Mailer, type OutgoingLetter } from './mailer.ts'

interface Options {
  /** `smtp://` or `smtps://`, with user and password where the relay wants them. Its query is not read. */
  url: string
  from: string
  timeouts?: Partial<typeof TIMEOUTS>
}

/** The library's own are minutes long. `whole` ends a relay that keeps a letter waiting byte by byte. */
const TIMEOUTS = { connect: 10_000, greeting: 10_000, socket: 30_000, whole: 90_000 }

const LOOPBACK = /^(localhost|127(?:\.\d{1,3}){3}|\[?::1\]?)$/

/** Sends through the relay of `SMTP_URL`. TLS with a valid certificate is required unless the relay is on this machine. */
export function smtpMailer({ url, from, timeouts }: Options): Mailer {
  const { protocol, hostname, port, username, password } = new URL(url)
  const local = LOOPBACK.test(hostname)
  const secure = protocol === 'smtps:'
  const limits = { ...TIMEOUTS, ...timeouts }
  const transport = createTransport({
    host: hostname.replace(/^\[|\]$/g, ''),
    port: port ? Number(port) : secure ? 465 : local ? 25 : 587,
    secure,
    requireTLS: !secure && !local,
    ignoreTLS: !secure && local,
    ...(username && { auth: { user: decodeURIComponent(username), pass: decodeURIComponent(password) } }),
    connectionTimeout: limits.connect,
    greetingTimeout: limits.greeting,
    socketTimeout: limits.socket,
    dnsTimeout: limits.connect,
    disableFileAccess: true,
    disableUrlAccess: true,
    logger: false,
  })
  return {
    send: async (letter) => {
      try {
        await within(limits.whole, transport.sendMail(message(letter, from)))
      } catch (error) {
        throw asSendError(error)
      }
    },
    probe: async () => {
      try {
        return await within(limits.whole, transport.verify())
      } catch {
        return false
      }
    },
    close: () => transport.close(),
  }
}

function message(letter: OutgoingLetter, from: string) {
  const { address } = letter.to
  // One plain address and no more: what a display name or a list could smuggle in is refused, not escaped.
  if (!/^[^\s<>,;:"()[\]\\@\p{Cc}]+@[^\s<>,;:"()[\]\\@\p{Cc}]+$/u.test(address))
    throw new SendError('letter', true, 'That is not a single e-mail address.')
  return {
    from,
    to: { name: oneLine(letter.to.name), address },
    envelope: { from: /<([^<>]+)>\s*$/.exec(from)?.[1] ?? from, to: address },
    subject: oneLine(letter.subject),
    text: letter.text,
    html: letter.html,
    messageId: letter.messageId,
    ...(letter.inReplyTo && { inReplyTo: letter.inReplyTo, references: letter.inReplyTo }),
    xMailer: false as const,
    headers: {
      'Auto-Submitted': 'auto-generated',
      ...(letter.stopUrl && {
        'List-Unsubscribe': `<${letter.stopUrl}>`,
        'List-Unsubscribe-Post': 'List-Unsubscribe=One-Click',
      }),
    },
  }
}

/**
 * Whose fault it was, and whether to try again (RFC 5321 section 4.2.1). A 5xx to the recipient or to the text is about this letter
 * and final; a 5xx before that (sign-in, sender) is about how the relay is set up, which an admin can mend.
 */
export function asSendError(error: unknown): SendError {
  if (error instanceof SendError) return error
  const {
    responseCode,
    command,
    code,
    message = 'unknown',
  } = (error ?? {}) as {
    responseCode?: number
    command?: string
    code?: string
    message?: string
  }
  const words = oneLine(message).slice(0, 500)
  const aboutLetter = command === 'RCPT TO' || command === 'DATA'
  if (responseCode === 552 || (responseCode && responseCode >= 500 && aboutLetter))
    return new SendError('letter', true, words)
  if (!responseCode && (code === 'EMESSAGE' || (code === 'EENVELOPE' && command === 'API')))
    return new SendError('letter', true, words)
  if (responseCode && responseCode !== 421 && responseCode < 500 && (aboutLetter || command === 'MAIL FROM'))
    return new SendError('letter', false, words)
  return new SendError('relay', false, words)
}

async function within<T>(ms: number, work: Promise<T>): Promise<T> {
  let timer: NodeJS.Timeout | undefined
  const late = new Promise<never>((_resolve, reject) => {
    timer = setTimeout(() => reject(new SendError('relay', false, `No answer within ${ms / 1000} s.`)), ms)
    timer.unref()
  })
  try {
    return await Promise.race([work, late])
  } finally {
    clearTimeout(timer)
  }
}
