// Package potential describes what a packet meets: two leads, the layers
// between them, and the height V(x) and mass m(x) they make. It knows no time,
// no grid and no energy.
//
// # Units
//
// Any unit system with hbar = 1. A mass is then a mass, a height an energy,
// and hbar^2/(2 m L^2) is written 1/(2 m L^2).
//
// # Conventions
//
// x = 0 is the left face of the first layer (or the step, where there is no
// layer) and x = Width() is the right face of the last. To the left of 0 is
// the entry lead, to the right of Width() the exit lead, each of constant
// height and mass. The Hamiltonian is
//
//	H = -(1/2) d/dx (1/m(x)) d/dx + V(x) - i loss(x),
//
// Hermitian where loss is zero; psi and (1/m) dpsi/dx are continuous
// (D. J. BenDaniel and C. B. Duke, Phys. Rev. 152, 683 (1966)).
//
// A Structure is cut into segments on which V and m are smooth (analytic), so
// that a method of high order can be used on each without care for its
// neighbours. Infinitely thin (delta) layers stand at segment faces.
//
// # What is not promised
//
// A shape with infinite tails (sech2, gauss, smooth-step) is cut at the window
// it was given, or at the one chosen from Options.Cut: what lies outside is
// dropped, which leaves a jump of at most Cut at each edge of the window.
package potential
