// Package published holds scattering problems whose answers follow from
// published formulas, and runs them: a check of this program on this machine
// that needs nothing else.
//
// # Units
//
// Natural units (hbar = mass = 1) unless a case states others in its scenario.
//
// # Conventions
//
// Group delays are from face to face, as everywhere in this program. A phase
// delay refers both waves to the middle of the structure instead, as the
// literature on smooth potentials does; see Check.
//
// # Where the numbers come from
//
// Each case names the source of its formula. The expected numbers were
// evaluated from it with mpmath to 30 digits, the averages over a packet's
// spectrum by quadrature of it to at least 12, and each was confirmed by a
// second way (dense matching of the wave at the faces, or a Taylor
// integration of the differential equation). FromMemory marks a formula or
// citation that was recalled and not looked up again.
//
// # What is not promised
//
// That all of the program is right: only what these cases touch.
package published
