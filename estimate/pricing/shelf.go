package pricing

// detail is what a line hands on to the percentages upon it.
type detail struct {
	terms   []term
	entries int32
}

// detailed is a line with its detail.
type detailed struct {
	line *Line
	detail
}

// shelf holds the lines of a category: added rate by rate, read by place.
type shelf struct {
	places []int // of the lines
	lines  []detailed
	first  []int // of each place, and the number of lines
}

// add puts a line on the shelf.
func (s *shelf) add(place int, d detailed) {
	s.places = append(s.places, place)
	s.lines = append(s.lines, d)
}

// sort orders the lines by place, those of a place as they were added.
func (s *shelf) sort(places int) {
	s.first = make([]int, places+1)
	for _, p := range s.places {
		s.first[p+1]++
	}
	for p := range places {
		s.first[p+1] += s.first[p]
	}
	next := append([]int(nil), s.first...)
	sorted := make([]detailed, len(s.lines))
	for i, p := range s.places {
		sorted[next[p]] = s.lines[i]
		next[p]++
	}
	s.lines, s.places = sorted, nil
}

// of returns the lines of a place. A nil shelf has none.
func (s *shelf) of(place int) []detailed {
	if s == nil {
		return nil
	}
	return s.lines[s.first[place]:s.first[place+1]]
}
