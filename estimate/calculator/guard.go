package calculator

import (
	"reflect"
)

// guarded returns the answer, or a fault where one of its numbers is none: a last
// line behind the limits of the request.
func guarded[T any](answer T) (T, error) {
	if sound(reflect.ValueOf(answer)) {
		return answer, nil
	}
	var none T
	return none, Faults{{"", "a result that is not a finite number", "the request cannot be computed",
		"lengths, loads and stiffnesses of usual sizes"}}
}

// sound tells whether every number in v is finite.
func sound(v reflect.Value) bool {
	switch v.Kind() {
	case reflect.Float64:
		return finite(v.Float())
	case reflect.Pointer:
		return v.IsNil() || sound(v.Elem())
	case reflect.Slice:
		if v.Len() == 0 || v.Index(0).Kind() == reflect.String {
			return true
		}
		for i := range v.Len() {
			if !sound(v.Index(i)) {
				return false
			}
		}
	case reflect.Struct:
		for i := range v.NumField() {
			if !sound(v.Field(i)) {
				return false
			}
		}
	}
	return true
}
