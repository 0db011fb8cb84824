// Package scenarios turns a scenario file into a verdict: it reads the file,
// brings it to internal units, chooses the numerics that its tolerance asks
// for, runs both roads and compares them.
//
// # From file to scenario
//
// Read reads the TOML text of a scenario and returns a File, in which every
// quantity keeps the number, the unit and the place it was written with.
// Quantities, Get and Set reach them by path (packet.energy,
// layer[0].thickness, bias.drop); Encode writes a File back. Compile brings a
// File to a Scenario. Whatever a file can be, no more than an *InputError
// comes of it: one line that names file, line, column and key, says what is
// wrong and what is accepted.
//
// # Units
//
// In a file, quantities are texts with units, or plain numbers where the file
// says units = "natural" (hbar = 1). The constants behind the units are those
// of CODATA 2022. In a Scenario everything is in internal units: hbar = 1, and
// in the packet's lead the mass is 1 and the mean wave number
//
//	k0 = sqrt(2 m (E - V))/hbar
//
// is 1, so that the mean kinetic energy there is 1/2, a length is in units of
// the wave length over 2 pi, and a time is in units of hbar over twice the
// kinetic energy. Scale brings numbers back to the units of the output. The
// conversion goes through eV, nm and fs, in which a peV and a caesium atom are
// far from the limits of a float64; it loses a few units in the last place.
//
// # Conventions
//
// Those of package potential: x = 0 is the left face of the first layer.
// Energies and heights share one zero, the file's. A Scenario is never
// mirrored: for a packet from the right, start and near lie at x > b, far at
// x <= 0, and K0 is positive all the same.
//
// A shape with tails is cut where it falls below a thousandth of the tolerance
// times the packet's mean kinetic energy.
//
// # What is not promised
//
// Encode keeps neither comments nor layout. Files and tables above 16 MiB,
// more than 100,000 layers, and more than 100,000 rows in all tables together
// are refused, and so are sizes beyond 1e50 times the internal unit.
package scenarios
