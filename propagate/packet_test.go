package propagate

import "testing"

// The sampling error is held against a sum over many points between the nodes,
// and falls with the order to rounding.
func TestSamplingError(t *testing.T) {
	s := freeSetup()
	before := 1.0
	for _, order := range []int{6, 8, 10, 12} {
		s.order = order
		m := s.mesh(t)
		got := s.packet.SamplingError(m)
		psi := make([]complex128, m.Nodes())
		if err := s.packet.Fill(m, psi); err != nil {
			t.Fatal(err)
		}
		sampler, sum := NewSampler(m), 0.0
		left, right := sampler.Ends()
		const points = 40000
		for i := range points {
			x := left + (right-left)*(float64(i)+0.5)/points
			value, _, _ := sampler.At(psi, x)
			sum += square(value-s.packet.freeGaussian(x, 0)) * (right - left) / points
		}
		// A rule of twice the order does not integrate the square of a
		// difference that is above it exactly.
		near(t, "sampling error, ratio", got/sum, 1, 0.1)
		if !(got < before/20) {
			t.Errorf("order %d: error %g after %g", order, got, before)
		}
		before = got
	}
}
