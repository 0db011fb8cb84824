package scenarios

// mostBins bounds the history of the flow through the planes.
const mostBins = 1024

// history is the flow through both planes against time, in bins of equally
// many ticks; when they become too many, two become one.
type history struct {
	near, far []float64 // mean flow per time in each bin
	width     int       // ticks in a bin
	held      int       // ticks in the last bin
}

// add enters the flow of the next tick.
func (h *history) add(tick int, near, far float64) {
	h.width = max(h.width, 1)
	if tick/h.width >= mostBins {
		h.merge()
	}
	if bin := tick / h.width; bin >= len(h.near) {
		h.near, h.far, h.held = append(h.near, 0), append(h.far, 0), 0
	}
	last, n := len(h.near)-1, float64(h.held)
	h.near[last] = (h.near[last]*n + near) / (n + 1)
	h.far[last] = (h.far[last]*n + far) / (n + 1)
	h.held++
}

// merge makes every two bins one. They are all full, and of even number.
func (h *history) merge() {
	n := len(h.near) / 2
	for i := range n {
		h.near[i] = (h.near[2*i] + h.near[2*i+1]) / 2
		h.far[i] = (h.far[2*i] + h.far[2*i+1]) / 2
	}
	h.near, h.far = h.near[:n], h.far[:n]
	h.width *= 2
}
