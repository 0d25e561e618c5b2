import type { PhotoKind } from '#shared/domain/review/photo-kinds'
import { PHOTO_MAX_COUNT } from '#shared/domain/review/photo-kinds'
import type { Done } from '#shared/types/answers'
import type { PhotoBrief } from '#shared/types/reviews'

/** Photographs beside the clips of a draft. */
export function usePhotos(known: PhotoBrief[], ensureDraft: () => Promise<string | undefined>) {
  const photos = ref<PhotoBrief[]>([...known])
  const sending = useDeed()
  const removing = useDeed()
  /** Which kind the last deed was about, so that its words stand there. */
  const about = ref<PhotoKind>()
  const problem = computed(() => sending.problem.value ?? removing.problem.value)
  const isFull = computed(() => photos.value.length >= PHOTO_MAX_COUNT)

  async function add(kind: PhotoKind, file: File) {
    about.value = kind
    removing.problem.value = undefined
    const photo = await sending.run(async (headers) => {
      const id = await ensureDraft()
      const body = new FormData()
      body.append('photo', file)
      return await $fetch<PhotoBrief>(`/api/reviews/${id}/photos`, { method: 'POST', query: { kind }, headers, body })
    }, `${kind} ${file.name} ${file.size} ${file.lastModified}`)
    if (photo !== undefined && !photos.value.some(({ id }) => id === photo.id)) photos.value = [...photos.value, photo]
  }

  async function remove({ id, kind }: PhotoBrief) {
    about.value = kind
    sending.problem.value = undefined
    const done = await removing.run(() => $fetch<Done>(`/api/photos/${id}`, { method: 'DELETE' }), id)
    if (done !== undefined) photos.value = photos.value.filter(photo => photo.id !== id)
  }

  return { photos, add, remove, about, problem, isFull, isSending: sending.isPending }
}
