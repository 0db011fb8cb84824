package scenarios

import (
	"errors"
	"fmt"
	"math"
	"slices"
	"strconv"
	"strings"
)

// Quantity is a number with its unit, as written. In natural units Unit is
// empty; a mass given by a particle's name has that name as its unit.
type Quantity struct {
	Kind   Kind
	Number float64
	Unit   string
	Given  bool // false: the file does not state it
	at     place
}

// reach bounds the sizes a quantity may have, in its base unit, so that
// products of a few of them stay within a float64.
const reach = 1e100

// ParseQuantity reads a quantity of the given kind: a number and a unit, a
// particle's name (for a mass), a plain 0, or with natural a plain number.
// The error is an *InputError without file and place.
func ParseQuantity(kind Kind, natural bool, text string) (Quantity, error) {
	q, bad := parseQuantity(kind, natural, text)
	if bad != nil {
		bad.accepted = accepts(kind, natural, anySign)
		return Quantity{}, bad.locate("", "")
	}
	return q, nil
}

// parseQuantity is ParseQuantity without the statement of what is accepted.
func parseQuantity(kind Kind, natural bool, text string) (Quantity, *fault) {
	digits, rest := cutNumber(strings.TrimSpace(text))
	q := Quantity{Kind: kind, Unit: canonical(rest), Given: true}
	if digits == "" && kind == Mass && !natural && isName(q.Unit) {
		return named(q)
	}
	var err error
	if q.Number, err = number(digits, rest); err != nil {
		return q, &fault{msg: excerpt(text) + " " + err.Error()}
	}
	if msg := q.misfit(natural); msg != "" {
		return q, &fault{msg: excerpt(text) + " " + msg}
	}
	return q, nil
}

// named is the mass of a particle, whose name q has as its unit.
func named(q Quantity) (Quantity, *fault) {
	names := particleNames()
	if !slices.Contains(names, q.Unit) {
		return q, &fault{msg: strings.TrimSuffix(excerpt(q.Unit)+" is no particle known here; "+suggestion(q.Unit, names), "; ")}
	}
	q.Number = 1
	return q, nil
}

// misfit says what is wrong with the unit or the size, or nothing.
func (q Quantity) misfit(natural bool) string {
	plain := natural || q.Kind == Plain
	switch {
	case plain && q.Unit != "" && natural:
		return "has a unit in a file in natural units"
	case plain && q.Unit != "":
		return "has a unit"
	case !plain && q.Unit == "" && q.Number != 0:
		return "has no unit"
	case q.Unit != "":
		if msg := q.wrongUnit(); msg != "" {
			return msg
		}
	}
	if size := math.Abs(q.Base()); size != 0 && !(size >= 1/reach && size <= reach) {
		return "is out of reach: sizes from 1e-100 to 1e100 in " + q.Kind.base(natural) + " are kept"
	}
	return ""
}

// wrongUnit says what is wrong with the unit, or nothing.
func (q Quantity) wrongUnit() string {
	if _, ok := unitSize(q.Kind, q.Unit); ok {
		return ""
	}
	if other, ok := kindOf(q.Unit); ok {
		return "is " + other.article()
	}
	names := unitNames(q.Kind)
	if q.Kind == Strength {
		names = nil
	}
	return strings.TrimSuffix(fmt.Sprintf("has no unit known here: %s; %s", excerpt(q.Unit), suggestion(q.Unit, names)), "; ")
}

// base names the base unit of a kind.
func (k Kind) base(natural bool) string {
	if natural {
		return "natural units"
	}
	return [...]string{"plain numbers", "nm", "eV", "fs", "eV fs^2/nm^2", "eV nm"}[k]
}

// cutNumber parts a text after its leading decimal number: digits with an
// optional sign, point and exponent.
func cutNumber(s string) (digits, rest string) {
	i := 0
	if i < len(s) && (s[i] == '+' || s[i] == '-') {
		i++
	}
	mantissa := i
	for i < len(s) && (isDigit(s[i]) || s[i] == '.') {
		i++
	}
	if i == mantissa {
		return "", s
	}
	return s[:i+exponent(s[i:])], strings.TrimSpace(s[i+exponent(s[i:]):])
}

// exponent returns the length of a leading decimal exponent.
func exponent(s string) int {
	if s == "" || s[0] != 'e' && s[0] != 'E' {
		return 0
	}
	i := 1
	if i < len(s) && (s[i] == '+' || s[i] == '-') {
		i++
	}
	first := i
	for i < len(s) && isDigit(s[i]) {
		i++
	}
	if i == first {
		return 0
	}
	return i
}

func isDigit(c byte) bool { return '0' <= c && c <= '9' }

// number converts the digits that cutNumber found before rest.
func number(digits, rest string) (float64, error) {
	if err := oddNumber(digits, rest); err != nil {
		return 0, err
	}
	v, err := strconv.ParseFloat(digits, 64)
	switch {
	case errors.Is(err, strconv.ErrRange):
		return 0, errors.New("is larger than a number can be (1.8e308)")
	case err != nil:
		return 0, errors.New("is not a number")
	case v == 0 && strings.ContainsAny(mantissa(digits), "123456789"):
		return 0, errors.New("is smaller than a number can be (5e-324)")
	}
	return v, nil
}

func mantissa(digits string) string {
	m, _, _ := strings.Cut(strings.ToLower(digits), "e")
	return m
}

// oddNumber recognises what other programs may take for a number.
func oddNumber(digits, rest string) error {
	lower := strings.ToLower(strings.TrimLeft(rest, "+-"))
	switch {
	case digits != "" && strings.HasPrefix(rest, "_"):
		return errors.New("has an underscore in its number")
	case (digits == "0" || digits == "-0" || digits == "+0") && (strings.HasPrefix(lower, "x") || strings.HasPrefix(lower, "o") || strings.HasPrefix(lower, "b")):
		return errors.New("is not a decimal number")
	case digits != "":
		return nil
	case rest == "":
		return errors.New("is empty")
	case strings.HasPrefix(lower, "nan") || strings.HasPrefix(lower, "inf"):
		return errors.New("is not a finite number")
	}
	return errors.New("does not start with a number")
}

// Base returns the quantity in the base unit of its kind: nm, eV, fs,
// eV fs^2/nm^2 or eV nm; in natural units the number itself.
func (q Quantity) Base() float64 { return q.Number * unitBase(q.Kind, q.Unit) }

// unitBase is the size of a unit that is known to exist; none at all is 1.
func unitBase(k Kind, name string) float64 {
	if name == "" {
		return 1
	}
	size, ok := unitSize(k, name)
	if !ok {
		panic(fmt.Sprintf("scenarios: %q is not a unit of %v", name, k))
	}
	return size
}

// To returns the quantity in another unit of its kind, or the quantity itself
// where it has no unit and is given none.
func (q Quantity) To(name string) (Quantity, error) {
	name = canonical(name)
	if name == q.Unit {
		return q, nil
	}
	size, ok := unitSize(q.Kind, name)
	if !ok || q.Unit == "" && q.Number != 0 {
		return q, fmt.Errorf("%v cannot be stated in %s; %s", q, excerpt(name), accepts(q.Kind, false, anySign))
	}
	q.Number, q.Unit = q.Base()/size, name
	return q, nil
}

// String returns the quantity as a scenario file states it, without quotation
// marks.
func (q Quantity) String() string {
	digits := shortest(q.Number)
	switch {
	case q.Unit == "":
		return digits
	case q.Kind == Mass && q.Number == 1 && slices.Contains(particleNames(), q.Unit):
		return q.Unit
	}
	return digits + " " + q.Unit
}

// shortest writes a number with as few digits as bring it back.
func shortest(v float64) string { return strconv.FormatFloat(v, 'g', -1, 64) }
