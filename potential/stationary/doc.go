// Package stationary solves for the scattering states of a structure at fixed
// energy and averages what they say over the momentum spectrum of a Gaussian
// packet.
//
// # Units
//
// Those of package potential: hbar = 1. Times are then inverse energies.
//
// # Conventions
//
// The Hamiltonian is the one of package potential. A wave of unit amplitude
// comes in from the near lead (the entry; with fromRight the exit) and leaves
// through both. With k the wave number and v = k/m the speed in a lead,
//
//	near lead: exp(ikx) + r exp(-ikx),  x = 0 at the near face,
//	far lead:  t exp(iqx'),             x' = 0 at the far face,
//
// so the phases are face to face: for equal leads arg t exceeds the phase
// referred to one common origin by k times the width. Amplitudes are given
// flux-normalised, T = t sqrt(v_out/v_in), so that |T|^2 and |R|^2 are
// probabilities. Delays are d(arg t)/dE and d(arg r)/dE.
//
// # Method
//
// The pair (u, w) = (psi, psi'/m) is carried from the outgoing wave at the far
// face to the near face, where it is split into incident and reflected wave:
//
//	u' = m w,   w' = 2 (V - i loss - E) u.
//
// The outgoing solution is the dominant one in that direction, so a thick
// barrier costs nothing in accuracy; a running logarithm of the scale keeps
// everything in range. The complex solution is held as p + i q with p and q
// real and nearly orthogonal, and the small one of the two is rebuilt from
// the flux, which is known exactly: it is constant where nothing is lost and
// grows by 2 loss |psi|^2 dx where something is. That keeps the width of a
// narrow resonance accurate although it is far below the rounding of p, and
// T <= 1 whatever the structure. The derivative with respect to energy is
// carried along by the derivative of each layer's matrix: no differences are
// taken anywhere.
//
// A flat layer is closed form; a delta is a jump of w; every other segment is
// crossed by Taylor series in x about the middles of short slices, summed to
// rounding.
//
// # What is conserved
//
// Transmission + Reflection + Absorption = 1 to rounding. Transmission is the
// same from both sides, with loss too (reciprocity).
//
// # What is not promised
//
// Bit equality between machines. Resonances narrower than about 1e-13 of the
// energy cannot be resolved in double precision; Average counts them and
// covers what they can contribute in its errors.
package stationary
