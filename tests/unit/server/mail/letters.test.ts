import { describe, expect, it } from 'vitest'
import { firstNameOf, layOut, oneLine, safeHref } from '#server/features/mail/layout'
import type { Letter } from '#server/features/mail/letters/index'
import { isLetterName, listLetterNames, writeLetter } from '#server/features/mail/letters/index'
import { answeredLetter } from '#server/features/mail/letters/answered'
import { invitationLetter } from '#server/features/mail/letters/invitation'
import { reviewWaitingLetter } from '#server/features/mail/letters/review-waiting'
import { letterSamples } from './letter-samples'

const HOSTILE = '<script>alert(1)</script>"\'&\r\nBcc: other@example.test\u202E'

function writeSamples(): [string, Letter][] {
  return listLetterNames().map(name => [name, writeLetter(name, letterSamples[name])])
}

/** What a reader of the HTML reads: no tags, entities undone, each run of white space one space. */
function wordsOf(markup: string): string {
  return markup
    .replace(/^[\s\S]*?<h1/, '<h1')
    .replace(/<[^>]*>/g, ' ')
    .replace(/&lt;/g, '<').replace(/&gt;/g, '>').replace(/&quot;/g, '"').replace(/&#39;/g, '\'').replace(/&amp;/g, '&')
    .replace(/\s+/g, ' ').replace(/ ([.,])/g, '$1').trim()
}

function linksOf(markup: string): string[] {
  return [...markup.matchAll(/href="([^"]*)"/g)].map(match => (match[1] ?? '').replace(/&amp;/g, '&'))
}

function textLinksOf(text: string): string[] {
  return text.match(/https?:\/\/\S+/g) ?? []
}

/** The text part as the reader of the HTML would read it: no addresses, no colon before them, no signature mark. */
function textWithoutAddresses(text: string): string {
  return text
    .replace(/,([^\n]*):\nhttps?:\/\/\S+/g, ',$1.')
    .replace(/:\nhttps?:\/\/\S+/g, '')
    .replace('\n-- \n', '\n')
    .replace(/\s+/g, ' ').trim()
}

describe.each(writeSamples())('letter %s', (name, letter) => {
  it('has a subject of one line and words in both parts', () => {
    expect(letter.subject).toMatch(/^\S[^\r\n]{5,80}$/)
    expect(letter.text.length).toBeGreaterThan(100)
  })

  it('says in its text part what its HTML says', () => {
    const fromText = textWithoutAddresses(letter.text)
    // The text part sets a colon where the HTML has two columns.
    const facts = fromText.replace(/(Question|Student|Coach|Promised by|For|Amount|Paid on|Order): /g, '$1 ')
    expect(facts).toBe(wordsOf(letter.html))
  })

  it('holds the same addresses in both parts, those of its data', () => {
    expect(linksOf(letter.html)).toEqual(textLinksOf(letter.text))
    const given = Object.entries(letterSamples[isLetterName(name) ? name : 'answered']).flatMap(([key, value]) => key.endsWith('Url') ? [value] : [])
    expect(new Set(linksOf(letter.html))).toEqual(new Set(given))
    expect(given.length).toBeGreaterThan(0)
  })

  it('names the studio and the reason at its foot', () => {
    for (const part of [letter.text, letter.html]) {
      expect(part).toContain('Northfield Studio writes to you with Turfnote.')
      expect(part).toContain('You get this letter because')
    }
  })

  it('brings no picture, script, style sheet or font from anywhere', () => {
    expect(letter.html).not.toMatch(/<(?:img|script|link|iframe|object|video|style)\b|url\(|@import|\bsrc=|\son\w+=/i)
  })

  it('speaks plainly: no exclamation mark, no address of an image', () => {
    expect(letter.text).not.toContain('!')
  })
})

describe('letters with hostile words', () => {
  it.each(listLetterNames())('escapes every field of %s', (name) => {
    const data = Object.fromEntries(Object.entries(letterSamples[name]).map(([key, value]) => [
      key, key.endsWith('Url') || key === 'role' || typeof value !== 'string' ? value : `${HOSTILE}${key}`,
    ]))
    const letter = writeLetter(name, { ...letterSamples[name], ...data })
    expect(letter.html).not.toContain('<script')
    expect(letter.html).not.toContain('\u202E')
    expect(letter.subject).not.toMatch(/[\r\n\u202E]/)
    // Only the coach's own lines may start a line; a name or a title never does.
    expect(letter.text.split('\n').filter(line => line.startsWith('Bcc:') && !line.endsWith('firstLines'))).toEqual([])
    expect(letter.text).toContain('<script>alert(1)</script>')
  })

  it('keeps the lines of a coach as lines, each cleaned', () => {
    const letter = answeredLetter({ ...letterSamples.answered, firstLines: 'one <b>\ntwo\u0007\n\n\n\nthree' })
    expect(letter.html).toContain('one &lt;b&gt;<br>two</p>')
    expect(letter.text).toContain('one <b>\ntwo\n\nthree')
  })

  it('does not leave with an address that is not absolute http or https', () => {
    for (const reviewUrl of ['javascript:alert(1)', '/reviews/1', 'data:text/html,x', '', 'http://']) {
      expect(() => answeredLetter({ ...letterSamples.answered, reviewUrl }), reviewUrl).toThrow(TypeError)
    }
  })
})

describe('the letters one by one', () => {
  it('tells that the coach has answered, by first name, and marks the one change', () => {
    const letter = answeredLetter(letterSamples.answered)
    expect(letter.subject).toBe('Mara has answered')
    expect(letter.html).toMatch(/background:#FFE36E[^>]*>One change: keep the grip end travelling past the ball before the wrists let go\.</)
    expect(letter.html.match(/#FFE36E/g)).toHaveLength(1)
  })

  it('tells a guardian whose review it is and why the copy came', () => {
    const letter = answeredLetter({ ...letterSamples.answered, readerName: 'Ada Okafor', studentName: 'Teo Okafor', isGuardianCopy: true })
    expect(letter.subject).toBe('Mara has answered')
    expect(letter.text).toContain('Ada, Mara Lindqvist has answered the review of Teo Okafor.')
    expect(letter.text).toContain('you are the guardian of Teo')
  })

  it('tells a coach who was chosen, and every coach when the first free one answers', () => {
    const chosen = reviewWaitingLetter(letterSamples['review-waiting'])
    expect(chosen.subject).toBe('A review waits, promised by Thu 21 May, 17:00')
    expect(chosen.text).toContain('Mara, Joel Okafor has sent film and chose you')
    const free = reviewWaitingLetter({ ...letterSamples['review-waiting'], coachName: undefined })
    expect(free.text).toContain('The first free coach answers it')
    expect(free.text).toContain('Coach: First free')
  })

  it('invites in the words of the role', () => {
    expect(invitationLetter(letterSamples.invitation).subject).toBe('Ines Carvalho invites you to Northfield Studio')
    expect(invitationLetter({ ...letterSamples.invitation, role: 'owner' }).text).toContain('Join Northfield Studio as an owner')
  })

  it('gives the time until which a link works', () => {
    expect(writeLetter('confirm-address', letterSamples['confirm-address']).text).toContain('until Wed 20 May, 09:15')
    expect(writeLetter('forgotten-password', letterSamples['forgotten-password']).text).toContain('until Tue 19 May, 10:15')
    expect(writeLetter('invitation', letterSamples.invitation).text).toContain('until Tue 26 May, 09:00')
    expect(writeLetter('password-changed', letterSamples['password-changed']).text).toContain('on Tue 19 May, 09:20')
  })
})

describe('the layout', () => {
  it('shows the preheader before anything else and hides it from the page', () => {
    const letter = layOut({ subject: 's', preheader: 'a & b', heading: 'h', blocks: [], studioName: 'S', why: 'w' })
    expect(letter.html).toMatch(/<body[^>]*>\s*<div style="display:none[^"]*">a &amp; b<\/div>/)
  })

  it('makes one line of anything', () => {
    expect(oneLine(' a\r\n\tb \u0000\u2028 c\u202Ed ')).toBe('a b c d')
    expect(oneLine('')).toBe('')
    expect(oneLine('Zoë 李 🏌️')).toBe('Zoë 李 🏌️')
  })

  it('takes the first word of a name', () => {
    expect(firstNameOf('  Mara\nLindqvist')).toBe('Mara')
    expect(firstNameOf('Mara')).toBe('Mara')
    expect(firstNameOf('')).toBe('')
  })

  it('writes addresses so that they cannot leave their attribute', () => {
    expect(safeHref('https://a.test/x?y=1&z="><script>')).toBe('https://a.test/x?y=1&z=%22%3E%3Cscript%3E')
  })

  it('knows its letters by name, and no inherited one', () => {
    expect(isLetterName('answered')).toBe(true)
    expect(isLetterName('toString')).toBe(false)
  })
})
