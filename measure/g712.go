package measure

import "math"

// Load capacity: level of the largest sine without overload, dBm0. Source:
// ITU-T Rec. G.711 (11/1988): T_max of the two laws.
const (
	LoadMu = 3.17
	LoadA  = 3.14
)

// Where the limits come from, to be printed beside them.
const (
	SineLimitSource  = "ITU-T G.712 method 2, full channel; second-hand: quoted by others, the Recommendation's text was not seen"
	NoiseLimitSource = "ITU-T G.712 method 1, full channel; from memory, unverified: no verdict"
)

// LevelPoint is one point of a distortion test.
type LevelPoint struct {
	LevelDBm0 float64 // input level
	DB        float64 // signal to total distortion, as a meter reads it
	SNRDB     float64 // signal to error: a gain other than 1 counts as error
	LimitDB   float64 // NaN where there is none
	MarginDB  float64 // DB less LimitDB
}

// limit712 are (dBm0, dB) with straight lines between.
var (
	sineLimit712  = [][2]float64{{-45, 22}, {-40, 27}, {-30, 33}, {0, 33}}
	noiseLimit712 = [][2]float64{{-55, 12.6}, {-40, 27.6}, {-34, 32.2}, {-27, 33.9}, {-6, 33.9}, {-3, 26.3}}
)

// SineLimit is the least signal to total distortion ratio of a 1020 Hz sine at
// a level in dBm0; NaN outside -45 to 0. See SineLimitSource.
func SineLimit(dBm0 float64) float64 { return interpolate(sineLimit712, dBm0) }

// NoiseLimit is SineLimit for band-limited noise of near-Gaussian amplitude;
// NaN outside -55 to -3. See NoiseLimitSource.
func NoiseLimit(dBm0 float64) float64 { return interpolate(noiseLimit712, dBm0) }

func interpolate(points [][2]float64, x float64) float64 {
	for i := 1; i < len(points); i++ {
		a, b := points[i-1], points[i]
		if a[0] <= x && x <= b[0] {
			return a[1] + (b[1]-a[1])*(x-a[0])/(b[0]-a[0])
		}
	}
	return math.NaN()
}

// DistortionLevels are the levels at which the tests are made, dBm0: the
// corners of both limits and points between.
var DistortionLevels = []float64{-55, -50, -45, -40, -34, -30, -27, -20, -15, -10, -6, -3, 0, 3}

// ZeroDBm0 is the rms of 0 dBm0, full scale = 1.0, for a design whose overload
// point is that of a sine at loadDB dBm0 (LoadMu, LoadA; for other designs a
// convention to be stated).
func ZeroDBm0(overload, loadDB float64) float64 {
	return overload / math.Sqrt2 * math.Pow(10, -loadDB/20)
}

// SineTest measures signal to total distortion of a 1020 Hz sine at the given
// levels; zero is the rms of 0 dBm0.
func SineTest(thresholds, values []float64, zero float64, levels []float64) []LevelPoint {
	return levelTest(levels, SineLimit, func(level float64) Energies {
		return SineEnergies(thresholds, values, math.Sqrt2*zero*math.Pow(10, level/20))
	})
}

// NoiseTest is SineTest for Gaussian noise, without the standard's band
// limits: the staircase has no memory, so its total distortion depends on the
// amplitudes alone.
func NoiseTest(thresholds, values []float64, zero float64, levels []float64) []LevelPoint {
	return levelTest(levels, NoiseLimit, func(level float64) Energies {
		return GaussianEnergies(thresholds, values, zero*math.Pow(10, level/20))
	})
}

func levelTest(levels []float64, limit func(float64) float64, at func(float64) Energies) []LevelPoint {
	out := make([]LevelPoint, len(levels))
	for i, level := range levels {
		e := at(level)
		p := LevelPoint{LevelDBm0: level, DB: e.TotalDistortion(), SNRDB: e.SNR(), LimitDB: limit(level)}
		p.MarginDB = p.DB - p.LimitDB
		out[i] = p
	}
	return out
}
