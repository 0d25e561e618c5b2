// @vitest-environment happy-dom
import { mount, RouterLinkStub } from '@vue/test-utils'
import { describe, expect, it, vi } from 'vitest'
import { createSSRApp, h, nextTick } from 'vue'
import { renderToString } from 'vue/server-renderer'
import UiButton from '~/components/ui/Button.vue'

function mountButton(props: Record<string, unknown>, onClick = vi.fn()) {
  const wrapper = mount(UiButton, {
    props,
    attrs: { onClick },
    slots: { default: 'Send' },
    global: { stubs: { NuxtLink: RouterLinkStub } },
  })
  return { wrapper, onClick }
}

describe('UiButton', () => {
  it('does not submit a form unless told to', () => {
    expect(mountButton({}).wrapper.attributes('type')).toBe('button')
    expect(mountButton({ type: 'submit' }).wrapper.attributes('type')).toBe('submit')
  })

  it('hands on a press', async () => {
    const { wrapper, onClick } = mountButton({})
    await wrapper.trigger('click')
    expect(onClick).toHaveBeenCalledOnce()
  })

  it('swallows presses while pending, says so, and stays focusable', async () => {
    const { wrapper, onClick } = mountButton({ pending: true })
    await wrapper.trigger('click')
    expect(onClick).not.toHaveBeenCalled()
    expect(wrapper.attributes('aria-disabled')).toBe('true')
    expect(wrapper.attributes('aria-busy')).toBe('true')
    expect(wrapper.attributes('disabled')).toBeUndefined()
  })

  it('does not send its form while pending', async () => {
    const onSubmit = vi.fn((event: Event) => event.preventDefault())
    const wrapper = mount(
      { render: () => h('form', { onSubmit }, [h(UiButton, { type: 'submit', pending: true }, () => 'Send')]) },
      { attachTo: document.body, global: { stubs: { NuxtLink: RouterLinkStub } } },
    )
    wrapper.get('button').element.click()
    expect(onSubmit).not.toHaveBeenCalled()
    wrapper.unmount()
  })

  it('is disabled when told', () => {
    expect(mountButton({ disabled: true }).wrapper.attributes('disabled')).toBeDefined()
  })

  it('is a link with an address, and a disabled button with an address that is not open', () => {
    const link = mountButton({ to: '/reviews' }).wrapper
    expect(link.getComponent(RouterLinkStub).props('to')).toBe('/reviews')
    expect(mountButton({ to: '/reviews', disabled: true }).wrapper.element.tagName).toBe('BUTTON')
  })

  it('waits for the page to come alive when the server has drawn it', async () => {
    const host = document.createElement('div')
    // What the server sends: the attribute is there until the browser has taken over.
    const createPage = () => createSSRApp(UiButton).component('NuxtLink', RouterLinkStub)
    host.innerHTML = (await renderToString(createPage())).replace('<button', '<button disabled')
    document.body.append(host)
    const button = host.querySelector('button')
    expect(button?.disabled).toBe(true)
    createPage().mount(host)
    await nextTick()
    expect(button?.isConnected).toBe(true)
    expect(button?.disabled).toBe(false)
    host.remove()
  })
})
