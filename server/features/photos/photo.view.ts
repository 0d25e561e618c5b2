import type { PhotoBrief } from '#shared/types/reviews'
import type { PhotoRow } from './photo.repository'

export function viewPhoto(row: PhotoRow): PhotoBrief {
  return { id: row.id, kind: row.kind, widthPx: row.width_px, heightPx: row.height_px, createdAtMs: row.created_at_ms }
}
