package scenarios

// Bounds of the history of the flow through the planes: so many of the first
// ticks one by one, and the whole run in so many bins.
const (
	firstTicks = 2048
	mostBins   = 1024
)

// history is the flow through both planes against time.
type history struct {
	first flows // of the first ticks
	whole bins  // of all
}

// flows are a near and a far flow, probability per time outward.
type flows struct{ near, far []float64 }

func (f *flows) add(near, far float64) { f.near, f.far = append(f.near, near), append(f.far, far) }

// bins are means over equally many ticks; when they become too many, two
// become one.
type bins struct {
	flows
	width int // ticks in a bin
	held  int // ticks in the last bin
}

// add enters the flow of the next tick, counted from 0.
func (h *history) add(tick int, near, far float64) {
	if tick < firstTicks {
		h.first.add(near, far)
	}
	h.whole.enter(tick, near, far)
}

func (b *bins) enter(tick int, near, far float64) {
	b.width = max(b.width, 1)
	if tick/b.width >= mostBins {
		b.merge()
	}
	if tick/b.width >= len(b.near) {
		b.add(0, 0)
		b.held = 0
	}
	last, n := len(b.near)-1, float64(b.held)
	b.near[last] = (b.near[last]*n + near) / (n + 1)
	b.far[last] = (b.far[last]*n + far) / (n + 1)
	b.held++
}

// merge makes every two bins one. They are all full, and of even number.
func (b *bins) merge() {
	n := len(b.near) / 2
	for i := range n {
		b.near[i] = (b.near[2*i] + b.near[2*i+1]) / 2
		b.far[i] = (b.far[2*i] + b.far[2*i+1]) / 2
	}
	b.near, b.far = b.near[:n], b.far[:n]
	b.width *= 2
}
