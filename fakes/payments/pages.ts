import { formatMinor } from './currencies'
import type { StoredLineItem, StoredSession } from './objects'

const STYLE = `
  :root { color-scheme: light; }
  * { box-sizing: border-box; }
  body { margin: 0; padding: 1.5rem 1rem; background: #eef0e6; color: #22251c; font: 1rem/1.5 system-ui, sans-serif; }
  main { max-width: 30rem; margin: 0 auto; padding: 1.5rem; background: #fff; border: 2px dashed #6b705c; }
  h1 { margin: 0; font-size: 1.25rem; }
  h2 { margin: 0 0 .25rem; font-size: 1rem; }
  .note { margin: .25rem 0 1.5rem; color: #4a4e3f; }
  .problem { margin: 0 0 1.5rem; padding: .75rem 1rem; border-left: 4px solid #a3241a; background: #fbeeec; }
  ul { margin: 0; padding: 0; list-style: none; }
  li, .total { display: flex; justify-content: space-between; gap: 1rem; padding: .5rem 0; border-bottom: 1px solid #cfd3c2; overflow-wrap: anywhere; }
  .total { margin: 0 0 1.5rem; font-weight: 700; }
  .amount { white-space: nowrap; font-variant-numeric: tabular-nums; }
  form { margin: 0 0 .75rem; }
  button { width: 100%; min-height: 3rem; padding: .5rem 1rem; border: 2px solid #22251c; background: #fff; color: #22251c; font: inherit; font-weight: 600; cursor: pointer; }
  button.first { background: #22251c; color: #fff; }
  button:focus-visible, a:focus-visible { outline: 3px solid #1f5fbf; outline-offset: 2px; }
  a { color: #1f4f9c; }
`

/** The page a person pays on: what is bought, what it costs, and the three ways it can end. */
export function checkoutPage(session: StoredSession, items: readonly StoredLineItem[], problem?: string): string {
  const action = (name: string) => `/pay/${encodeURIComponent(session.id)}/${name}`
  const rows = items.map(item => `
      <li><span>${escapeHtml(item.description)}${item.quantity > 1 ? ` × ${item.quantity}` : ''}</span>
      <span class="amount">${escapeHtml(formatMinor(item.amount_total, item.currency))}</span></li>`)
  const total = formatMinor(session.amount_total, session.currency)
  const leave = session.cancel_url === null ? '' : button(action('abandon'), 'Walk away')
  return page('Pay', `
    ${problem === undefined ? '' : `<p class="problem" role="alert">${escapeHtml(problem)}</p>`}
    <h2 id="bought">You are buying</h2>
    <ul aria-labelledby="bought">${rows.join('')}
    </ul>
    <p class="total"><span>Total</span> <span class="amount">${escapeHtml(total)}</span></p>
    ${button(action('pay'), `Pay ${total}`, 'first')}
    ${button(action('decline'), 'Pay with a card that is declined')}
    ${leave}`)
}

/** A page that only says something, with a way on where there is one. */
export function messagePage(title: string, message: string, link?: { href: string, text: string }): string {
  return page(title, `
    <h2>${escapeHtml(title)}</h2>
    <p>${escapeHtml(message)}</p>
    ${link === undefined ? '' : `<p><a href="${escapeHtml(link.href)}">${escapeHtml(link.text)}</a></p>`}`)
}

function button(action: string, text: string, className = ''): string {
  return `<form method="post" action="${escapeHtml(action)}"><button class="${className}" type="submit">${escapeHtml(text)}</button></form>`
}

function page(title: string, content: string): string {
  return `<!doctype html>
<html lang="en">
<head>
  <meta charset="utf-8">
  <meta name="viewport" content="width=device-width, initial-scale=1">
  <title>${escapeHtml(title)} – Card page stand-in</title>
  <style>${STYLE}</style>
</head>
<body>
  <main>
    <h1>Card page stand-in</h1>
    <p class="note">No card is charged here. This page stands where the card provider's own page would be.</p>
    ${content}
  </main>
</body>
</html>
`
}

function escapeHtml(text: string): string {
  return text.replaceAll('&', '&amp;').replaceAll('<', '&lt;').replaceAll('>', '&gt;').replaceAll('"', '&quot;').replaceAll('\'', '&#39;')
}

/** Where a paid session sends the person; the placeholder is replaced as the real service does. */
export function successAddress(session: StoredSession): string {
  return session.success_url.replaceAll('{CHECKOUT_SESSION_ID}', session.id)
}
