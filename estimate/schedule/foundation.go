package schedule

// KindFoundation is the kind of rows that may be of concrete alone.
const KindFoundation = "foundation"

// isFoundation tells whether a row is a foundation by its kind, or by what it calls
// itself where the kind is blank.
func (f *fields) isFoundation() bool {
	name := f.kind
	if name.state == blank {
		name = f.product
	}
	return name.state == given && fold(name.value) == KindFoundation
}

// concreteAlone tells whether the row may be without mass, section and length.
func (f *fields) concreteAlone() bool {
	return f.isFoundation() && f.concrete.state == given && f.concrete.value > 0
}

// unheld tells whether a row whose support is blank is a foundation that names no
// section: it is not sized.
func (f *fields) unheld() bool {
	noSection := f.product.state == blank || fold(f.product.value) == KindFoundation
	return f.isFoundation() && noSection
}

func (f *fields) lengthBounds() span {
	if f.isFoundation() && f.concrete.state != blank {
		return noLengths
	}
	return lengths
}
