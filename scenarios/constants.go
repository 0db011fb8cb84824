package scenarios

import "math"

// The constants of nature behind the units: CODATA 2022 (P. J. Mohr,
// D. B. Newell, B. N. Taylor and E. Tiesinga, Rev. Mod. Phys. 97, 025002
// (2025)). Those marked exact are so by the definition of the SI.
const (
	planck            = 6.62607015e-34   // h in J s, exact
	boltzmann         = 1.380649e-23     // k_B in J/K, exact
	electronVolt      = 1.602176634e-19  // eV in J, exact
	electronMass      = 9.1093837139e-31 // m_e in kg, +-28 in the last digits
	atomicMass        = 1.66053906892e-27
	neutronMass       = 1.67492750056e-27
	protonMass        = 1.67262192595e-27
	lightSpeed        = 299.792458          // c in nm/fs, exact
	kilogram          = 1e12 / electronVolt // in eV fs^2/nm^2
	hbarElectronVolts = planck / electronVolt / (2 * math.Pi) * 1e15
)

// hbar is the reduced Planck constant in the base units (eV fs), or 1 in
// natural units.
func hbar(natural bool) float64 {
	if natural {
		return 1
	}
	return hbarElectronVolts
}
