/**
 * Lets the strict style policy stand: every <style> the app makes at run time carries the page's nonce.
 * Naive UI makes its own without one, and FullCalendar looks for the nonce under another name. Import this first.
 */
const nonce = document.querySelector<HTMLMetaElement>('meta[property="csp-nonce"]')?.nonce

if (nonce) {
  const make = document.createElement.bind(document)
  document.createElement = (tag: string, options?: ElementCreationOptions) => {
    const element = make(tag, options)
    if (tag === 'style') element.nonce = nonce
    return element
  }

  const forCalendar = make('meta')
  forCalendar.name = 'csp-nonce'
  forCalendar.content = nonce
  document.head.append(forCalendar)
}
