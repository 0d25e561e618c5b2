import { defineStore } from 'pinia'
import { ref } from 'vue'
import { parseKeptLetter, type KeptLetter } from '~/utils/kept-letter'

const KEY_PREFIX = 'turfnote.letter.'

/** Letters that the server does not have yet, kept on this device so that nothing typed is lost with the connection. */
export const useAnswerDraftStore = defineStore('answer-draft', () => {
  /** False when the device keeps nothing (private windows, full disk); the letter then lives in this page only. */
  const canKeep = ref(true)

  function keep(reviewId: string, letter: KeptLetter) {
    try {
      window.localStorage.setItem(KEY_PREFIX + reviewId, JSON.stringify(letter))
      canKeep.value = true
    }
    catch {
      canKeep.value = false
    }
  }

  function find(reviewId: string): KeptLetter | undefined {
    try {
      return parseKeptLetter(window.localStorage.getItem(KEY_PREFIX + reviewId))
    }
    catch {
      return undefined
    }
  }

  function forget(reviewId: string) {
    try {
      window.localStorage.removeItem(KEY_PREFIX + reviewId)
    }
    catch {
      canKeep.value = false
    }
  }

  return { canKeep, keep, find, forget }
})
