// Package propagate is the packet road: it carries one quantum packet in time
// across a one-dimensional structure and measures what passes two planes, what
// layers absorb, and how long the packet stays in them.
//
// A Layout divides the axis into elements, a Mesh gives them matrices, a
// Stepper holds a packet and its Ledger, and a Run steps to the end. A
// Scatterer solves the stationary problem on the very same elements, so that
// the error of the grid can be computed before a step is taken.
//
// # Units
//
// Any unit system with hbar = 1, as in package potential: energies are
// angular frequencies, k^2/(2m) is an energy, a time step times an energy is
// a phase.
//
// # Sign and normalisation
//
// The time factor is exp(-iEt); a wave exp(ikx) with k > 0 moves to the right.
// The Hamiltonian is that of package potential, a loss being V - i loss. psi
// has norm 1 in the mesh's own quadrature at the start. Probability that
// passes a plane counts positive outward, on both sides. Phases are counted
// from the stepper's energy origin E0: psi carries exp(-i(E-E0)t).
//
// # Grid and edges
//
// Spectral elements: Gauss-Lobatto-Legendre nodes of order p, faces on every
// face of the structure and on both planes, V and m smooth inside each
// element. The mass matrix is diagonal by quadrature; the weak form carries the
// continuity of psi and psi'/m. Point potentials stand on faces. The scheme is
// exponentially accurate in p (A. T. Patera, J. Comput. Phys. 54, 468 (1984)).
//
// Behind the ends of the real axis stand edges: a few elements, each longer
// than the last, rotated into the complex plane (exterior complex scaling),
// with the wall psi = 0 behind them. Edge.Reflection and Scatterer.At compute
// what an edge sends back; ChooseEdge finds one that is good enough.
//
// Inside an element a wave function is kept by the amplitudes of the element's
// own eigenmodes. Eliminating the interior (static condensation: R. J. Guyan,
// AIAA J. 3, 380 (1965)) is then diagonal, and a solve costs a few operations
// a node. Nodal values are made when they are asked for.
//
// # Time steps
//
// A step is a diagonal Pade approximant of exp(-i(H-E0)dt): member 1 is the
// Crank-Nicolson (Cayley) step, members 2 to 5 are of order 4 to 10. It is
// applied as a product of m unitary factors, each one solve. All members share
// the eigenstates of H, so that the step changes when things happen (error of
// order dt^(2m), Pade.SlopeError) but not how much passes where in the end.
//
// # What is conserved
//
// In exact arithmetic, for every dt and member: the norm of a packet that
// touches neither an edge nor a loss; and always the ledger,
//
//	Left + Right + sum(Lost) + Inside = 1,
//
// because each factor has a continuity equation of its own (see Ledger).
// Rounding moves it by about 2^-53 a solve in long steps, by a quarter of that
// in short ones. Without losses a step can be
// undone by conjugating psi.
//
// # What is not promised
//
// Bit equality between machines or versions: the compiler may fuse multiply
// and add. On one machine a run repeats bit for bit, also from a saved State.
// |psi|^2 inside an edge is not a density. Dwell times are a trapezoidal sum
// over the steps: they need steps short enough that |psi|^2 is sampled without
// aliasing (dt times the width of the packet's band in energy below 2 pi).
// Nothing here chooses a resolution: package scenarios does.
package propagate
