package scenarios

import "math"

// reading says whether the structure hurried or held the pulse, or only
// filtered it.
func (r *ShiftRoads) reading(part string) string {
	total, structure, filter := r.Total.Average, r.Structure.Average, r.Filter.Average+r.ExitLead.Average
	noise := 3*r.Total.Error + 1e-9*math.Abs(r.Free)
	comes := "what is " + part + " comes " + side(total, noise, "later than in free flight", "earlier than in free flight", "as in free flight")
	why := "the filter"
	if math.Abs(r.ExitLead.Average) > math.Abs(r.Filter.Average) {
		why = "the other speed behind the structure"
	}
	switch {
	case math.Abs(structure) <= noise && math.Abs(filter) <= noise:
		return comes + ": the structure neither moved nor filtered it"
	case math.Abs(structure) <= noise:
		return comes + " by " + why + " alone: the structure neither hurried nor held it"
	case math.Abs(filter) <= noise:
		return comes + ": the structure itself " + did(structure) + " it, and filtered nothing"
	case math.Abs(total) <= noise:
		return comes + ": the structure " + did(structure) + " it, and " + why + " makes up for it"
	case (structure > 0) != (total > 0):
		return comes + " only by " + why + ": the structure itself " + did(structure) + " it"
	case (filter > 0) != (total > 0):
		return comes + " although " + why + " works against it: the structure itself " + did(structure) + " it"
	case math.Abs(structure) >= math.Abs(filter):
		return comes + " mainly by the structure, which " + did(structure) + " it; " + why + " adds to that"
	}
	return comes + " mainly by " + why + "; the structure itself also " + did(structure) + " it"
}

func did(structure float64) string { return side(structure, 0, "held", "hurried", "did not move") }

// side words a sign.
func side(v, noise float64, positive, negative, none string) string {
	switch {
	case v > noise:
		return positive
	case v < -noise:
		return negative
	}
	return none
}
