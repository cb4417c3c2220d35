package beam

// LoadKind says how a load acts.
type LoadKind uint8

const (
	// Uniform is Start (N/m) from From to To; End is 0 or equal to Start.
	Uniform LoadKind = iota + 1
	// Linear runs straight from Start at From to End at To (N/m).
	Linear
	// Point is a force Start (N) at From.
	Point
	// Moment is a couple Start (N.m) at From, clockwise +.
	Moment
	// Curvature is an imposed curvature (1/m, sagging +), straight from Start at
	// From to End at To, as of a temperature gradient: α ΔT / depth, warm below +.
	Curvature
)

// distributed tells whether the load has a length.
func (k LoadKind) distributed() bool { return k == Uniform || k == Linear || k == Curvature }

// Load is one action on the member.
type Load struct {
	Kind       LoadKind
	From, To   float64 // m; Point and Moment stand at From, their To is not read
	Start, End float64 // N/m, N, N.m or 1/m by Kind; down +, clockwise +, sagging +
}

// ends returns the intensity at From and at To of a distributed load.
func (l Load) ends() (start, end float64) {
	if l.Kind == Uniform {
		return l.Start, l.Start
	}
	return l.Start, l.End
}

// Case is a set of loads that act together. Factors belong to Term.
type Case []Load
