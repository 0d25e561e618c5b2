/**
 * Makes the small films that the tests read, and notes their true frame times beside them.
 *
 * Run once by hand: `npx jiti tests/support/film/make.ts`. Needs Debian's ffmpeg with libx264, libx265 and
 * libvpx; the tests themselves need none of it. Truth comes from `ffprobe -show_frames`, which decodes each film and
 * lists the frames that are shown, edit lists applied: a reader of its own, unlike the one under test.
 */
import { execFileSync } from 'node:child_process'
import { mkdirSync, rmSync, writeFileSync } from 'node:fs'
import { dirname, join } from 'node:path'
import { fileURLToPath } from 'node:url'
import { z } from 'zod'

const folder = join(dirname(fileURLToPath(import.meta.url)), 'made')

const H264 = ['-c:v', 'libx264', '-preset', 'veryslow', '-crf', '42', '-pix_fmt', 'yuv420p']
const PLAIN = [...H264, '-bf', '0', '-g', '30']

function picture(rate: number, seconds: number): string[] {
  return ['-f', 'lavfi', '-i', `testsrc2=size=96x160:rate=${rate}:duration=${seconds}`]
}

const tone = ['-f', 'lavfi', '-i', 'sine=frequency=440:duration=1:sample_rate=8000']
const place = '+55.7000-002.9000/'
/** Frame times as a phone in changing light writes them: 30 a second, each up to 8 ms late. */
const uneven = 'settb=1/600,setpts=N*20+mod(N*7\\,5)'

/** One film a line: its name, and what ffmpeg is told. */
const RECIPES: Record<string, string[]> = {
  'plain-30.mp4': [...picture(30, 2), ...PLAIN],
  'faststart-30.mp4': [...picture(30, 2), ...PLAIN, '-movflags', '+faststart'],
  'slow-240.mp4': [...picture(240, 0.5), ...PLAIN, '-video_track_timescale', '57600'],
  'b-frames.mp4': [...picture(30, 2), ...H264, '-bf', '3', '-g', '30'],
  'negative-offsets.mp4': [...picture(30, 1), ...H264, '-bf', '3', '-movflags', '+negative_cts_offsets'],
  'ntsc-29.97.mp4': [...picture(30, 1), ...PLAIN, '-vf', 'settb=1001/30000,setpts=N', '-r', '30000/1001', '-video_track_timescale', '30000'],
  'uneven.mov': [...picture(30, 2), ...H264, '-bf', '2', '-vf', uneven, '-vsync', 'passthrough', '-enc_time_base', '1/600', '-video_track_timescale', '600'],
  'fragmented.mp4': [...picture(30, 2), ...PLAIN, '-g', '15', '-movflags', '+frag_keyframe+empty_moov+default_base_moof'],
  'fifteen.mp4': [...picture(15, 1), ...PLAIN],
  'with-sound.mp4': [...picture(30, 1), ...tone, ...PLAIN, '-c:a', 'aac', '-b:a', '16k'],
  'sound-only.mp4': [...tone, '-c:a', 'aac', '-b:a', '16k'],
  'place-in-keys.mov': [...picture(30, 1), ...PLAIN, '-movflags', '+use_metadata_tags', '-metadata', `com.apple.quicktime.location.ISO6709=${place}`, '-metadata', 'com.apple.quicktime.model=Phone 1'],
  'place-in-user-data.mp4': [...picture(30, 1), ...PLAIN, '-metadata', `location=${place}`],
  'place-in-text.mov': [...picture(30, 0.5), ...PLAIN, '-metadata', `location=${place}`],
  'hevc.mp4': [...picture(30, 1), '-c:v', 'libx265', '-crf', '45', '-pix_fmt', 'yuv420p', '-tag:v', 'hvc1', '-x265-params', 'log-level=none'],
  'ten-bit.mp4': [...picture(30, 1), '-c:v', 'libx264', '-crf', '42', '-pix_fmt', 'yuv420p10le'],
  'prores.mov': ['-f', 'lavfi', '-i', 'color=size=32x32:rate=30:duration=0.2', '-c:v', 'prores_ks', '-profile:v', '0', '-pix_fmt', 'yuv422p10le'],
  'mpeg4-part2.mp4': [...picture(30, 0.5), '-c:v', 'mpeg4', '-q:v', '31'],
  'over-a-minute.mp4': ['-f', 'lavfi', '-i', 'color=size=32x32:rate=24:duration=61', ...H264, '-bf', '0', '-g', '9999'],
  'one-frame.mp4': [...picture(30, 1), ...PLAIN, '-frames:v', '1'],
  'vp9.webm': [...picture(30, 1), '-c:v', 'libvpx-vp9', '-crf', '60', '-b:v', '0', '-g', '15'],
  'live.webm': [...picture(30, 1), '-c:v', 'libvpx-vp9', '-crf', '60', '-b:v', '0', '-f', 'webm', '-live', '1'],
  'vp8-with-sound.webm': [...picture(30, 0.5), ...tone, '-t', '0.5', '-c:v', 'libvpx', '-crf', '60', '-b:v', '50k', '-c:a', 'libvorbis'],
  'place.webm': [...picture(30, 0.5), '-c:v', 'libvpx', '-crf', '60', '-b:v', '50k', '-metadata', `LOCATION=${place}`],
}

/** Films made from other films, without decoding. */
const COPIES: Record<string, { from: string, options: string[], input?: string[] }> = {
  'rotated-90.mov': { from: 'plain-30.mp4', options: ['-c', 'copy', '-t', '0.5', '-metadata:s:v:0', 'rotate=270'] },
  'edit-list.mp4': { from: 'b-frames.mp4', input: ['-ss', '0.5'], options: ['-c', 'copy'] },
}

const probeSchema = z.object({
  streams: z.array(z.object({ time_base: z.string() })),
  frames: z.array(z.object({ pts: z.number() })),
})

function ffmpeg(options: string[]): void {
  execFileSync('ffmpeg', ['-y', '-v', 'error', ...options], { cwd: folder, stdio: 'inherit' })
}

/** Bit-exact muxing leaves out dates and versions, so that a second run writes the same bytes. */
const SAME_AGAIN = ['-fflags', '+bitexact', '-flags:v', '+bitexact', '-threads', '1']

function findTruth(name: string) {
  const asked = ['-v', 'quiet', '-select_streams', 'v:0', '-show_frames', '-show_entries', 'stream=time_base:frame=pts', '-of', 'json', name]
  const { streams, frames } = probeSchema.parse(JSON.parse(execFileSync('ffprobe', asked, { cwd: folder, encoding: 'utf8' })))
  const timeBase = Number(streams[0]?.time_base.split('/')[1] ?? 0)
  return timeBase === 0 ? undefined : { timeBase, ticks: frames.map(frame => frame.pts).sort((a, b) => a - b) }
}

rmSync(folder, { recursive: true, force: true })
mkdirSync(folder)
for (const [name, options] of Object.entries(RECIPES))
  ffmpeg([...options, ...SAME_AGAIN, name])
for (const [name, { from, input, options }] of Object.entries(COPIES))
  ffmpeg([...(input ?? []), '-i', from, ...options, ...SAME_AGAIN, name])

const version = execFileSync('ffprobe', ['-version'], { encoding: 'utf8' }).split(' Copyright')[0]
const lines = [...Object.keys(RECIPES), ...Object.keys(COPIES)].sort().flatMap((name) => {
  const truth = findTruth(name)
  return truth ? [`    ${JSON.stringify(name)}: ${JSON.stringify(truth)}`] : []
})
writeFileSync(join(folder, 'truth.json'), `{\n  "source": ${JSON.stringify(`${version} -show_frames, pts`)},\n  "films": {\n${lines.join(',\n')}\n  }\n}\n`)
