package scenarios

// Bounds of the history of what passes the planes: so many of the first ticks
// one by one, and the whole run in so many bins.
const (
	firstTicks = 2048
	mostBins   = 1024
)

// history is what passed both planes, against time.
type history struct {
	first, whole passages
	width        int // ticks in a bin of whole
	held         int // ticks in its last bin
}

// passages are probabilities that passed the planes outward, each up to a time
// from the one before.
type passages struct{ ends, near, far []float64 }

func (p *passages) add(end, near, far float64) {
	p.ends, p.near, p.far = append(p.ends, end), append(p.near, near), append(p.far, far)
}

// add enters what passed in one tick; fine tells that the tick is a short one.
func (h *history) add(end, near, far float64, fine bool) {
	if fine && len(h.first.ends) < firstTicks {
		h.first.add(end, near, far)
	}
	h.width = max(h.width, 1)
	if len(h.whole.ends) == 0 || h.held == h.width {
		if len(h.whole.ends) == mostBins {
			h.merge()
		}
		h.whole.add(end, 0, 0)
		h.held = 0
	}
	last := len(h.whole.ends) - 1
	h.whole.ends[last] = end
	h.whole.near[last] += near
	h.whole.far[last] += far
	h.held++
}

// merge makes every two bins one. They are all full, and of even number.
func (h *history) merge() {
	p := &h.whole
	n := len(p.ends) / 2
	for i := range n {
		p.ends[i] = p.ends[2*i+1]
		p.near[i] = p.near[2*i] + p.near[2*i+1]
		p.far[i] = p.far[2*i] + p.far[2*i+1]
	}
	p.ends, p.near, p.far = p.ends[:n], p.near[:n], p.far[:n]
	h.width *= 2
}
