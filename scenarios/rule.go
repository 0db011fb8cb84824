package scenarios

import "fmt"

// rule is what a quantity's sign must obey.
type rule int

const (
	anySign rule = iota
	notNegative
	positive
)

// breaks says how v breaks the rule, or nothing.
func (r rule) breaks(v float64) string {
	switch {
	case r != anySign && v < 0:
		return "is negative"
	case r == positive && v == 0:
		return "is zero"
	}
	return ""
}

func (r rule) String() string {
	return [...]string{"", " of zero or more", " greater than zero"}[r]
}

// accepts is the sentence about what is accepted.
func accepts(k Kind, natural bool, r rule) string {
	switch {
	case k == Plain:
		return fmt.Sprintf("a plain number%v is accepted", r)
	case natural:
		return fmt.Sprintf(`%s%v is accepted, as a plain number (units = "natural")`, k.article(), r)
	}
	return fmt.Sprintf("%s%v is accepted, %s", k.article(), r, spelledUnits(k))
}
