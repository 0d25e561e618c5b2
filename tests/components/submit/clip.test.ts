import { mount } from '@vue/test-utils'
import { describe, expect, it } from 'vitest'
import type { ClipBrief } from '#shared/types/reviews'
import FilmClip from '~/components/film/Clip.vue'
import SubmitClip from '~/components/submit/Clip.vue'
import SubmitClipSending from '~/components/submit/ClipSending.vue'
import SubmitFilePicker from '~/components/submit/FilePicker.vue'
import SubmitStandDrawing from '~/components/submit/StandDrawing.vue'
import UiProgress from '~/components/ui/Progress.vue'

const clip: ClipBrief = {
  id: 'c1', view: 'face_on', state: 'accepted', fileName: 'swing.mov', bytes: 8_100_000, refusal: null,
  widthPx: 1080, heightPx: 1920, durationMs: 3100, framesPerSecond: 240, createdAtMs: 1,
}
const upload = { fileName: 'swing.mov', bytes: 8_100_000, sentBytes: 5_200_000, phase: 'sending' as const, problem: undefined }

function show(props: Partial<InstanceType<typeof SubmitClip>['$props']>) {
  return mount(SubmitClip, {
    props: { view: 'face_on', clip: undefined, upload: undefined, problem: undefined, ...props },
    global: {
      components: { FilmClip, SubmitClipSending, SubmitFilePicker, SubmitStandDrawing, UiProgress },
      stubs: { UiButton: { template: '<button type="button"><slot /></button>' } },
    },
  })
}

describe('one clip of a review', () => {
  it('says how to film before anything is sent', () => {
    const wrapper = show({})
    expect(wrapper.text()).toContain('four big steps in front of you')
    expect(wrapper.text()).toContain('Film or choose a clip')
    expect(wrapper.find('svg[role="img"]').attributes('aria-label')).toContain('square to the target line')
  })

  it('shows how much has gone', () => {
    const wrapper = show({ upload })
    expect(wrapper.text()).toContain('Sending 5.2 MB of 8.1 MB.')
    expect(wrapper.find('[role="progressbar"]').attributes('aria-valuenow')).toBe('64')
    expect(wrapper.text()).toContain('Stop sending')
  })

  it('says what was taken', () => {
    const wrapper = show({ clip })
    expect(wrapper.text()).toContain('Taken. 3.1 s · 240 frames a second · 1080 × 1920')
    expect(wrapper.find('video').attributes('src')).toBe('/api/clips/c1/film#t=0.001')
    expect(wrapper.text()).not.toContain('impact may not be visible')
  })

  it('warns of few frames a second without refusing', () => {
    expect(show({ clip: { ...clip, framesPerSecond: 30 } }).text()).toContain('impact may not be visible')
  })

  it('tells why a film was refused and what to do', () => {
    const wrapper = show({ clip: { ...clip, state: 'refused', refusal: 'has-sound' } })
    expect(wrapper.text()).toContain('This film still has its sound.')
    expect(wrapper.text()).toContain('mute it on your phone')
    expect(wrapper.text()).toContain('Send another')
  })

  it('has words for a reason it does not know', () => {
    expect(show({ clip: { ...clip, state: 'refused', refusal: 'from-the-future' } }).text()).toContain('This film was not taken.')
  })

  it('offers to go on with a clip that was cut off', async () => {
    const wrapper = show({ clip: { ...clip, state: 'uploading' } })
    expect(wrapper.text()).toContain('swing.mov (8.1 MB) was not sent to the end')
    const file = new File(['x'], 'swing.mov', { type: 'video/quicktime' })
    const input = wrapper.find<HTMLInputElement>('input[type="file"]')
    Object.defineProperty(input.element, 'files', { value: [file] })
    await input.trigger('change')
    expect(wrapper.emitted('goOn')).toEqual([[file]])
  })

  it('keeps the words of a failure and offers another try', () => {
    const wrapper = show({ clip: { ...clip, state: 'uploading' }, upload: { ...upload, phase: 'failed', problem: { words: 'The connection was lost. What has arrived is kept.', canGoOn: true } } })
    expect(wrapper.text()).toContain('The connection was lost. What has arrived is kept.')
    expect(wrapper.findAll('button').map(button => button.text())).toContain('Try again')
  })

  it('offers no second try for a file that cannot go through', () => {
    const wrapper = show({ upload: { ...upload, phase: 'failed', problem: { words: 'Not a video.', canGoOn: false } } })
    expect(wrapper.findAll('button').map(button => button.text())).not.toContain('Try again')
    expect(wrapper.text()).toContain('Send another')
  })
})
