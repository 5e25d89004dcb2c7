package spread

import (
	"errors"
	"fmt"
	"math"
	"math/rand/v2"
	"runtime"
	"sync"
	"sync/atomic"
)

// DefaultSeed is the seed of the random numbers where none is given.
const DefaultSeed = 1995

// Realisations that are drawn where no number is given, and at most; and how
// many velocities are drawn at most, realisations times layers.
const (
	DefaultRealisations = 100_000
	MaxRealisations     = 10_000_000
	MaxDraws            = 1_000_000_000
)

// Options are those of drawing. The zero value draws DefaultRealisations from
// DefaultSeed on all processors. Nothing but Realisations and Seed changes the
// result.
type Options struct {
	Realisations int    // 0 for DefaultRealisations, at most MaxRealisations
	Seed         uint64 // 0 for DefaultSeed
	Workers      int    // goroutines; 0 for GOMAXPROCS
}

// resolve returns the options with their defaults filled in.
func (o Options) resolve() (Options, error) {
	if o.Realisations < 0 || o.Realisations > MaxRealisations {
		return o, fmt.Errorf("%d realisations are not between 1 and %d", o.Realisations, MaxRealisations)
	}
	if o.Realisations == 0 {
		o.Realisations = DefaultRealisations
	}
	if o.Seed == 0 {
		o.Seed = DefaultSeed
	}
	if o.Workers <= 0 {
		o.Workers = runtime.GOMAXPROCS(0)
	}
	return o, nil
}

// Draw draws profiles from the model and returns their averages. In each, ln
// Vs of layer i is
//
//	ln Vᵢ = ln medianᵢ + σᵢZᵢ,   Z₁ = ε₁,   Zᵢ = ρᵢZᵢ₋₁ + √(1−ρᵢ²)·εᵢ
//
// with ε standard normal and the ρ of the model's Correlation (Toro 1995; one
// source). The boundaries move by normal errors of their own, none by more than
// half the thinner of the layers beside it. With a random Layering, boundaries
// come from its Poisson process, from the ground surface down; the median of
// a layer then is the time-averaged velocity of the profile over it, so that
// without sigmas all profiles drawn have the same average, and its sigma that
// of the profile at its middle.
//
// The errors are those of Propagate, except ErrLayering.
func (m *Model) Draw(o Options) (*Sample, error) {
	o, err := o.resolve()
	if err != nil {
		return nil, err
	}
	parts, err := m.parts()
	if err != nil {
		return nil, err
	}
	if m.Layering == (Layering{}) {
		if err := o.affordable(float64(len(parts))); err != nil {
			return nil, err
		}
		return run(o, 0, func() filler { return newStack(parts, m.Thickness) }), nil
	}
	if err := m.checkLayering(); err != nil {
		return nil, err
	}
	if err := o.affordable(1 + m.Layering.Expected(m.From+m.Thickness)); err != nil {
		return nil, err
	}
	return run(o, 0, func() filler { return &restack{parts: parts, model: m, boundary: m.Layering.inverse()} }), nil
}

// affordable returns an error where so many layers are too many for the number
// of realisations.
func (o Options) affordable(layers float64) error {
	if draws := float64(o.Realisations) * layers; draws > MaxDraws {
		return fmt.Errorf("%d realisations of %.0f layers are %.3g velocities to draw, more than %.3g: draw fewer",
			o.Realisations, layers, draws, float64(MaxDraws))
	}
	return nil
}

// checkLayering returns an error where the random layering is none.
func (m *Model) checkLayering() error {
	if m.Boundaries != nil {
		return errors.New("a random layering has its own boundaries: give either it or boundary errors")
	}
	if l := m.Layering; !l.valid(m.From + m.Thickness) {
		return fmt.Errorf("a layering of %.4g·(z + %.4g)^%.4g has no boundaries, or too many", l.C3, l.C1, l.C2)
	}
	return nil
}

// filler draws averages with the random numbers of one stream.
type filler interface {
	fill(dst []float64, rng *rand.Rand)
}

// block is how many realisations share one stream of random numbers. Every
// block has its own, whoever draws it, so that the result does not depend on
// how the blocks fall to the workers.
const block = 4096

// run draws all blocks and describes the sample. Each worker starts one filler.
func run(o Options, models int, start func() filler) *Sample {
	velocities := make([]float64, o.Realisations)
	blocks := (o.Realisations + block - 1) / block
	var next atomic.Int64
	work := func() {
		source := rand.NewPCG(0, 0)
		rng, f := rand.New(source), start()
		for {
			b := int(next.Add(1)) - 1
			if b >= blocks {
				return
			}
			source.Seed(stream(o.Seed, uint64(b)))
			f.fill(velocities[b*block:min((b+1)*block, o.Realisations)], rng)
		}
	}
	var wait sync.WaitGroup
	for range min(o.Workers, blocks) - 1 {
		wait.Go(work)
	}
	work()
	wait.Wait()
	return summarise(velocities, o.Seed, models)
}

// stream returns the seeds of the random numbers of block b: two outputs of
// the splitmix64 generator (Steele, Lea & Flood 2014, OOPSLA), which keeps
// neighbouring blocks apart.
func stream(seed, b uint64) (uint64, uint64) {
	var golden uint64 = 0x9e3779b97f4a7c15
	mix := func(x uint64) uint64 {
		x = (x ^ x>>30) * 0xbf58476d1ce4e5b9
		x = (x ^ x>>27) * 0x94d049bb133111eb
		return x ^ x>>31
	}
	s := mix(seed+golden) + 2*b*golden
	return mix(s + golden), mix(s + 2*golden)
}

// lanes is how many realisations are drawn side by side, layer by layer: the
// numbers of one layer stay in registers, those of the lanes in the cache.
const lanes = 256

// stack draws profiles whose layers are those of the model.
type stack struct {
	layers    []sheet
	thickness float64

	z, e, time, moved, before [lanes]float64
}

// sheet is a part with what drawing needs worked out.
type sheet struct {
	time, sigma  float64
	rho, own     float64 // weight of the Z above, and of the layer's own ε
	above, below float64 // s/m at its top and bottom
	move, most   float64 // m: standard error of its bottom, and how far it may move
}

func newStack(parts []part, thickness float64) *stack {
	s := &stack{layers: make([]sheet, len(parts)), thickness: thickness}
	for i := range parts {
		p := &parts[i]
		s.layers[i] = sheet{time: p.time, sigma: p.sigma, rho: p.rho, own: math.Sqrt(1 - p.rho*p.rho),
			above: p.above, below: p.below, move: p.boundary}
		if p.boundary > 0 {
			q := &parts[i+1]
			s.layers[i].most = min(p.bottom-p.top, q.bottom-q.top) / 2
		}
	}
	return s
}

func (s *stack) fill(dst []float64, rng *rand.Rand) {
	for len(dst) > 0 {
		n := min(lanes, len(dst))
		s.side(dst[:n], rng)
		dst = dst[n:]
	}
}

// side draws up to lanes averages side by side.
func (s *stack) side(dst []float64, rng *rand.Rand) {
	n := len(dst)
	z, e, time := s.z[:n], s.e[:n], s.time[:n]
	clear(z)
	clear(time)
	clear(s.before[:n])
	shifted := false // the boundary above has moved
	for i := range s.layers {
		l := &s.layers[i]
		s.excite(l, z, e, rng)
		if l.move == 0 && !shifted {
			slow(time, z, -l.sigma, l.time)
			continue
		}
		s.shift(l, time, z, rng)
		shifted = l.move > 0
	}
	for k := range dst {
		dst[k] = s.thickness / time[k]
	}
}

// excite carries Z from the layer above to layer l.
func (s *stack) excite(l *sheet, z, e []float64, rng *rand.Rand) {
	if l.own == 0 {
		return
	}
	for k := range e {
		e[k] = rng.NormFloat64()
	}
	for k := range z {
		z[k] = l.rho*z[k] + l.own*e[k]
	}
}

// slow adds the time of a layer whose boundaries stay where they are.
func slow(time, z []float64, sigma, layer float64) {
	for k := range time {
		time[k] += layer * exp(sigma*z[k])
	}
}

// shift adds the time of a layer whose top or bottom moves.
func (s *stack) shift(l *sheet, time, z []float64, rng *rand.Rand) {
	before, moved := s.before[:len(time)], s.moved[:len(time)]
	for k := range moved {
		moved[k] = 0
		if l.move > 0 {
			moved[k] = min(l.most, max(-l.most, l.move*rng.NormFloat64()))
		}
		time[k] += (l.time + moved[k]*l.below - before[k]*l.above) * exp(-l.sigma*z[k])
	}
	copy(before, moved)
}
