package scenarios

import "fmt"

// apart is how many lengths of the packet lie at least between its start and
// the structure, and between the near plane and its start.
const apart = 4

// packet brings the packet to internal units and refuses one that overlaps
// the structure, which ends at x = width.
func (c *compiler) packet(width float64) (Packet, error) {
	spec := &c.file.Packet
	energy, err := c.of(spec.Energy, "packet.energy")
	if err != nil {
		return Packet{}, err
	}
	p := Packet{Side: spec.From, Energy: energy, K0: 1}
	if p.Length, err = c.packetLength(); err != nil || !spec.Start.Given {
		return p, err
	}
	p.Start, err = c.position(spec.Start, "packet.start", p.behind(apart*p.Length, width), p,
		fmt.Sprintf("leaves the packet less than %d lengths clear of the structure", apart))
	return p, err
}

// packetLength is the length, given itself or by spread = hbar v0/(2 length).
func (c *compiler) packetLength() (float64, error) {
	spec := &c.file.Packet
	if spec.Length.Given {
		return c.of(spec.Length, "packet.length")
	}
	spread, err := c.of(spec.Spread, "packet.spread")
	return 1 / (2 * spread), err
}

// planes brings the planes to internal units and refuses those that the
// packet or the structure stands on.
func (c *compiler) planes(p Packet, width float64) (out Planes, err error) {
	spec := &c.file.Planes
	if spec.Near.Given {
		limit, msg := p.behind(2*apart*p.Length, width), "leaves no room for a packet %d lengths clear of it and of the structure"
		if p.Start != nil {
			limit, msg = p.behind(p.depth(width)+apart*p.Length, width), "does not lie %d lengths of the packet behind its start"
		}
		if out.Near, err = c.position(spec.Near, "planes.near", limit, p, fmt.Sprintf(msg, apart)); err != nil {
			return out, err
		}
	}
	if spec.Far.Given {
		out.Far, err = c.position(spec.Far, "planes.far", p.past(width), p, "does not lie past the far face of the structure")
	}
	return out, err
}

// bound is the end of a range of x: x or more, or else x or less.
type bound struct {
	x     float64
	above bool
}

// behind is where one is at least d away from the near face of a structure
// that ends at width.
func (p Packet) behind(d, width float64) bound {
	if p.Side == FromRight {
		return bound{width + d, true}
	}
	return bound{-d, false}
}

// past is where one is behind the far face.
func (p Packet) past(width float64) bound {
	if p.Side == FromRight {
		return bound{0, false}
	}
	return bound{width, true}
}

// depth is how far the start is from the near face.
func (p Packet) depth(width float64) float64 {
	if p.Side == FromRight {
		return *p.Start - width
	}
	return -*p.Start
}

// position converts a place on the x axis and refuses one out of bounds.
func (c *compiler) position(q Quantity, key string, b bound, p Packet, msg string) (*float64, error) {
	x, err := c.of(q, key)
	if err != nil {
		return nil, err
	}
	slack := 1e-9 * p.Length // so that a bound that was shown rounded is accepted
	if b.above && x >= b.x-slack || !b.above && x <= b.x+slack {
		return &x, nil
	}
	return nil, &fault{at: q.at, key: key, msg: fmt.Sprintf("%q %s", q, msg), accepted: c.file.orBeyond(b, b.x*c.length, q)}
}

// orBeyond is the sentence about the nearest accepted position.
func (f *File) orBeyond(b bound, base float64, like Quantity) string {
	if b.above {
		return f.inUnitOf(like, base).round(1).String() + " or more is accepted"
	}
	return f.inUnitOf(like, base).round(-1).String() + " or less is accepted"
}
