#!/bin/sh
# Makes the demo clips anew: invented messages of a harbour's traffic intercom,
# spoken by espeak-ng, with made-up engine noise from sox. Needs both from
# Debian 12 (espeak-ng 1.51, sox 14.4.2); other versions give other bytes, and
# checksums.txt, which the last line writes, then differs. Every random number
# is sox's from its fixed seed (-R). Clips appear in the current folder's clips/.
set -eu
work=$(mktemp -d)
trap 'rm -rf "$work"' EXIT

# clip NAME RATE VOICE SPEED PEAK_DB NOISE_DB TEXT [EFFECTS]
# EFFECTS come before the speech is set to its peak.
clip() {
	espeak-ng -v "$3" -s "$4" -w "$work/said.wav" "$7"
	# ${8:-} is split into words on purpose.
	sox -R "$work/said.wav" -r "$2" "$work/speech.wav" highpass 120 ${8:-} norm "$5" pad 0.28 0.28
	long=$(soxi -D "$work/speech.wav")
	# A diesel idling: brown noise and the firing rate with two harmonics.
	sox -R -n -r "$2" "$work/rumble.wav" synth "$long" brownnoise norm "$6"
	sox -R -n -r "$2" "$work/beat.wav" synth "$long" sine 26 synth "$long" sine mix 52 synth "$long" sine mix 78 norm "$6" gain -4
	sox -R -n -r "$2" "$work/hiss.wav" synth "$long" whitenoise norm "$6" gain -12
	sox -R -m -v 1 "$work/speech.wav" -v 1 "$work/rumble.wav" -v 1 "$work/beat.wav" -v 1 "$work/hiss.wav" \
		-b 16 -c 1 -r "$2" "clips/$1.wav"
}

mkdir -p clips
clip berth-nine 8000 en-gb 150 -6 -52 \
	"Harbour traffic, this is tug Marlin. We have the grain barge alongside, moving to berth nine."
clip stand-by 8000 en-us+f3 165 -7 -50 \
	"Tug Marlin, stand by. The ferry leaves in four minutes. Keep north."
clip faint-launch 8000 en-gb 160 -27 -74 \
	"Pilot launch to harbour traffic. Fog at the outer mole. I can see two lights only."
# An automatic gain that pumps holds this talker near full scale.
clip crane-hot 16000 en-us+f3 155 -0.6 -46 \
	"All stations. Crane three swings over the fairway until noon." \
	"compand 0.001,0.05 6:-70,-65,-30,-14,0,-9 0 -90 0.001 highpass 60 rate 16000"
clip quiet-water 16000 en-gb 145 -9 -56 \
	"Understood, harbour traffic. Slow ahead."

sha256sum clips/*.wav > checksums.txt
