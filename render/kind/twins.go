package kind

// twin notes that two states have one energy, and so one error.
func (b *builder) twin(first, other string) {
	for i := range b.twins {
		if b.twins[i][0] == first {
			b.twins[i] = append(b.twins[i], other)
			return
		}
	}
	b.twins = append(b.twins, []string{first, other})
}
