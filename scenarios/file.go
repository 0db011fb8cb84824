package scenarios

// File is a scenario as written: every quantity keeps its number, its unit and
// its place, so that it can be changed and written back. Read makes it and
// Compile turns it into what can be computed.
type File struct {
	Name      string // used in messages
	Title     string // one line, printable
	Tolerance float64
	Natural   bool // units = "natural": plain numbers, hbar = 1
	Particle  ParticleSpec
	Entry     LeadSpec
	Layers    []LayerSpec
	Exit      LeadSpec
	Bias      BiasSpec
	Packet    PacketSpec
	Planes    PlanesSpec
	Display   DisplaySpec

	source string // text it was read from; places point into it
}

// DefaultTolerance is the tolerance of a file that states none.
const DefaultTolerance = 1e-6

// ParticleSpec is the section [particle].
type ParticleSpec struct {
	Mass Quantity // not given in natural units: 1
	at   place
}

// LeadSpec is the section [entry] or [exit]. Height is 0 and Mass the
// particle's where not given.
type LeadSpec struct {
	Height, Mass Quantity
	at           place
}

// ShapeName is the name of a layer's shape.
type ShapeName string

// The shapes of a layer.
const (
	ShapeFlat       ShapeName = "flat"
	ShapeRamp       ShapeName = "ramp"
	ShapeDelta      ShapeName = "delta"
	ShapeSech2      ShapeName = "sech2"
	ShapeGauss      ShapeName = "gauss"
	ShapeSmoothStep ShapeName = "smooth-step"
	ShapeTable      ShapeName = "table"
)

// LayerSpec is one [[layer]]. Which quantities a shape takes is listed by
// (*LayerSpec).fields.
type LayerSpec struct {
	Shape             ShapeName
	Thickness         Quantity
	Height, HeightEnd Quantity
	Width             Quantity
	Strength          Quantity
	Mass              Quantity // not given: the particle's
	Loss              Quantity
	Table             *Table // of shape table
	at                place
}

// BiasSpec is the section [bias].
type BiasSpec struct {
	Drop Quantity
	at   place
}

// PacketSpec is the section [packet]. Of Length and Spread one is given.
type PacketSpec struct {
	Energy         Quantity
	Length, Spread Quantity
	From           Side
	Start          Quantity
	at             place
}

// PlanesSpec is the section [planes].
type PlanesSpec struct {
	Near, Far Quantity
	at        place
}

// DisplaySpec is the section [display]: names of units, empty where they are
// to be chosen.
type DisplaySpec struct{ Length, Energy, Time string }

// Clone returns a copy that can be changed without touching f. Tables are
// shared: they are never changed.
func (f *File) Clone() *File {
	c := *f
	c.Layers = append([]LayerSpec(nil), f.Layers...)
	return &c
}
