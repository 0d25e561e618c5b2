import { FILM_MAX_BYTES, FILM_MAX_DURATION_MS } from '#shared/domain/film/limits'

export interface FfmpegFiles {
  from: string
  to: string
  /** How the film is to be read: named, so that no file talks ffmpeg into another format, some of which fetch addresses. */
  demuxer: 'mov' | 'matroska'
}

/** A second over, so that a film that is too long is still seen to be. */
const MAX_SECONDS = FILM_MAX_DURATION_MS / 1000 + 1

/**
 * H.264 that every browser shows, upright, without sound and tags, a key frame every tenth of a second, and every frame at its own time:
 * `passthrough` neither drops nor doubles frames, and the time base of the file is kept, since that of a mean rate would round uneven times.
 * What the film says of itself is printed besides.
 */
export function ffmpegArguments({ from, to, demuxer }: FfmpegFiles): string[] {
  return [
    '-nostdin', '-hide_banner', '-loglevel', 'error', '-y',
    '-protocol_whitelist', 'file', '-f', demuxer, '-i', from,
    '-map_metadata', '0', '-f', 'ffmetadata', 'pipe:1',
    '-map', '0:v:0', '-an', '-sn', '-dn', '-map_metadata', '-1', '-map_chapters', '-1', '-fflags', '+bitexact', '-flags:v', '+bitexact',
    '-fps_mode', 'passthrough', '-enc_time_base', '-1',
    // Halved colour needs even sides.
    '-vf', 'scale=trunc(iw/2)*2:trunc(ih/2)*2', '-pix_fmt', 'yuv420p',
    '-c:v', 'libx264', '-profile:v', 'high', '-preset', 'veryfast', '-crf', '18', '-bf', '0', '-x264-params', 'scenecut=0',
    '-force_key_frames', 'expr:gte(t,n_forced*0.1)',
    '-t', String(MAX_SECONDS), '-fs', String(FILM_MAX_BYTES + 1), '-movflags', '+faststart', '-f', 'mp4', to,
  ]
}
