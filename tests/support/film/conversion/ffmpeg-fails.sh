#!/bin/sh
# An ffmpeg that fails.
echo 'it does not know this film' >&2
exit 1
