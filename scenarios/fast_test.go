//go:build !slow

package scenarios

// slowTests is set by the build tag slow.
const slowTests = false
