package bench

import (
	"encoding/binary"
	"hash/fnv"
	"math"
	"slices"
)

// mostFrames bounds the frames kept for designs that need them: of one clip ten
// minutes of 20 ms frames, of all twice as much, an even share of each but at
// least leastFrames.
const (
	mostFrames  = 30000
	leastFrames = 500
)

// frameShare is the bound on the frames kept of each of so many clips.
func frameShare(clips int) int {
	return max(leastFrames, min(mostFrames, 2*mostFrames/max(1, clips)))
}

// keeper keeps the frames of a clip whose hash of file, channel and position
// is smallest, so that the choice depends on neither order nor workers.
type keeper struct {
	file string
	unit float64 // amplitude of one word
	most int     // frames
	kept []keptFrame
}

type keptFrame struct {
	hash  uint64
	at    int64 // first sample
	ch    int
	words []int16
}

// consider offers a frame; it only reads the keeper's file, so that several
// chunks may offer at once. A nil keeper keeps none.
func (k *keeper) consider(list []keptFrame, ch int, at int64, p planes, a, b int) []keptFrame {
	if k == nil {
		return nil
	}
	h := fnv.New64a()
	h.Write([]byte(k.file))
	var pos [16]byte
	binary.LittleEndian.PutUint64(pos[:], uint64(at))
	binary.LittleEndian.PutUint64(pos[8:], uint64(ch))
	h.Write(pos[:])
	return append(list, keptFrame{hash: mix(h.Sum64()), at: at, ch: ch, words: p.asWords(ch, a, b, k.unit)})
}

// mix spreads a hash's low-order differences over all bits (the finaliser of
// splitmix64; Steele, Lea, Flood 2014).
func mix(z uint64) uint64 {
	z = (z ^ z>>30) * 0xbf58476d1ce4e5b9
	z = (z ^ z>>27) * 0x94d049bb133111eb
	return z ^ z>>31
}

// take adds offered frames and drops those beyond the bound.
func (k *keeper) take(list []keptFrame) {
	if k == nil {
		return
	}
	k.kept = append(k.kept, list...)
	if len(k.kept) >= 2*k.most {
		k.trim()
	}
}

func (k *keeper) trim() {
	slices.SortFunc(k.kept, func(a, b keptFrame) int {
		switch {
		case a.hash != b.hash && a.hash < b.hash:
			return -1
		case a.hash != b.hash:
			return 1
		case a.at != b.at:
			return int(a.at - b.at)
		}
		return a.ch - b.ch
	})
	k.kept = slices.Clip(k.kept[:min(len(k.kept), k.most)])
}

// words returns the kept frames in order of channel and time.
func (k *keeper) words() [][]int16 {
	if k == nil {
		return nil
	}
	k.trim()
	slices.SortFunc(k.kept, func(a, b keptFrame) int {
		if a.ch != b.ch {
			return a.ch - b.ch
		}
		return int(a.at - b.at)
	})
	out := make([][]int16, len(k.kept))
	for i, f := range k.kept {
		out[i] = f.words
	}
	return out
}

// asWords copies samples a to b of a channel to a grid of that unit.
func (p planes) asWords(ch, a, b int, unit float64) []int16 {
	if p.words != nil {
		return slices.Clone(p.words[ch][a:b])
	}
	out := make([]int16, b-a)
	for i, x := range p.reals[ch][a:b] {
		out[i] = int16(min(max(math.Round(x/unit), -32768), 32767))
	}
	return out
}
