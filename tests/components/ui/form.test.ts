// @vitest-environment happy-dom
import { flushPromises, mount } from '@vue/test-utils'
import { describe, expect, it } from 'vitest'
import { h } from 'vue'
import UiForm from '~/components/ui/Form.vue'
import UiInput from '~/components/ui/Input.vue'

const refusal = { statusCode: 401, code: 'wrong-email-or-password', message: 'They do not belong together.', fields: {} }

describe('UiForm', () => {
  it('sends by script and never puts fields into the address without it', async () => {
    const wrapper = mount(UiForm)
    expect(wrapper.attributes('method')).toBe('post')
    const event = new Event('submit', { cancelable: true })
    wrapper.element.dispatchEvent(event)
    expect(event.defaultPrevented).toBe(true)
    expect(wrapper.emitted('send')).toHaveLength(1)
  })

  it('says aloud what went wrong with the whole', () => {
    expect(mount(UiForm, { props: { problem: refusal } }).get('[role=alert]').text()).toBe('They do not belong together.')
  })

  it('leaves to the fields what is wrong with them, and takes the reader to the first', async () => {
    const wrapper = mount({
      props: { problem: { type: Object, default: undefined } },
      render() {
        return h(UiForm, { problem: this.problem }, () => [
          h(UiInput, { label: 'Name' }),
          h(UiInput, { label: 'E-mail', error: this.problem?.fields.email }),
        ])
      },
    }, { attachTo: document.body })
    await wrapper.setProps({ problem: { statusCode: 422, code: 'invalid-fields', message: 'Look again.', fields: { email: 'Enter an address.' } } })
    await flushPromises()
    expect(wrapper.find('[role=alert]').exists()).toBe(false)
    expect(document.activeElement).toBe(wrapper.findAll('input')[1]?.element)
    wrapper.unmount()
  })
})
