// @vitest-environment happy-dom
import { mount } from '@vue/test-utils'
import { describe, expect, it } from 'vitest'
import UiAvatar from '~/components/ui/Avatar.vue'

const person = { id: 'p1', name: 'Mara Lindqvist', hasPicture: true }

describe('UiAvatar', () => {
  it('shows initials without a picture', () => {
    expect(mount(UiAvatar, { props: { person: { ...person, hasPicture: false } } }).text()).toBe('ML')
  })

  it('shows the picture, and initials when it cannot be had', async () => {
    const wrapper = mount(UiAvatar, { props: { person } })
    const picture = wrapper.get('img')
    expect(picture.attributes('src')).toBe('/api/people/p1/picture')
    expect(picture.attributes('alt')).toBe('')
    await picture.trigger('error')
    expect(wrapper.find('img').exists()).toBe(false)
    expect(wrapper.text()).toBe('ML')
  })

  it('tries again when the picture has been replaced', async () => {
    const wrapper = mount(UiAvatar, { props: { person, version: 1 } })
    await wrapper.get('img').trigger('error')
    await wrapper.setProps({ version: 2 })
    expect(wrapper.get('img').attributes('src')).toBe('/api/people/p1/picture?v=2')
  })
})
