import type { ObjectDirective } from 'vue'

type Typed = HTMLInputElement | HTMLTextAreaElement

/*
 * Vue sets server-rendered fields back to its model when it takes a page over; on a slow phone that is after the first
 * words. These directives hand over what was entered before. They do nothing for fields that the browser itself created.
 */

/** For text fields. */
export function keepTyped(take: (text: string) => void): ObjectDirective<Typed> {
  return {
    created(field) {
      if (field.value !== field.defaultValue) take(field.value)
    },
    getSSRProps: () => ({}),
  }
}

/** For radio buttons bound by `:checked`; `v-model` sets them back in the same hook and may come first. */
export function keepPicked(take: (value: string) => void): ObjectDirective<HTMLInputElement> {
  return {
    created(button) {
      if (button.checked && !button.defaultChecked) take(button.value)
    },
    getSSRProps: () => ({}),
  }
}

/** For lists. */
export function keepSelected(take: (value: string) => void): ObjectDirective<HTMLSelectElement> {
  return {
    created(list) {
      const options = [...list.options]
      const rendered = options.find(option => option.defaultSelected) ?? options[0]
      if (rendered && list.value !== rendered.value) take(list.value)
    },
    getSSRProps: () => ({}),
  }
}
