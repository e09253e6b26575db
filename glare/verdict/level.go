package verdict

// byName finds a level of a criterion.
func byName[L any](levels []L, name string, of func(L) string) (L, bool) {
	for _, l := range levels {
		if of(l) == name {
			return l, true
		}
	}
	var none L
	return none, false
}
