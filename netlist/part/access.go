package part

import "standoff/netlist/quantity"

// Spread returns what a figure can be at 25 deg C, from least to greatest. The
// nominal value is the typical one where that is known, else the middle. Of a
// limit the sheet often gives one side and the typical value: the spread runs
// from one to the other. Where a spread (not a limit) lacks a side, what stands
// in for it is guaranteed by nobody and the mark is Assumed. ok is false where
// neither side is known.
func (r *Ratings) Spread(symbol string) (s quantity.Spread, mark Mark, ok bool) {
	f, known := r.Figures[symbol]
	if !known || !f.HasMin && !f.HasMax {
		return s, Assumed, false
	}
	s, mark = quantity.Spread{Low: f.Min, High: f.Max}, f.Mark
	switch {
	case !f.HasMin:
		s.Low = f.Max
	case !f.HasMax:
		s.High = f.Min
	}
	s.Nominal = s.Low/2 + s.High/2
	if f.HasTyp {
		s.Nominal, s.Low, s.High = f.Typ, min(s.Low, f.Typ), max(s.High, f.Typ)
	}
	if sense, _ := SymbolOf(r.Kind, symbol); sense.Sense == Either && f.HasMin != f.HasMax {
		mark = Assumed
	}
	return s, mark, true
}

// Limit returns the guaranteed side of a figure, by the sense of its symbol: the
// greatest value where the maker promises "not more", the least where he
// promises "not less". Of a spread or a condition it is the greatest value. A
// typical value never is a limit.
func (r *Ratings) Limit(symbol string) (value float64, mark Mark, ok bool) {
	f, known := r.Figures[symbol]
	if !known {
		return 0, Assumed, false
	}
	s, _ := SymbolOf(r.Kind, symbol)
	switch {
	case s.Sense == Least && f.HasMin:
		return f.Min, f.MinMark, true
	case s.Sense == Least:
		return 0, Assumed, false
	case f.HasMax:
		return f.Max, f.MaxMark, true
	case s.Sense != Greatest && f.HasMin:
		return f.Min, f.MinMark, true
	}
	return 0, Assumed, false
}

// Test returns a test condition.
func (r *Ratings) Test(symbol string) (float64, bool) {
	f, ok := r.Figures[symbol]
	if !ok {
		return 0, false
	}
	if f.HasMax {
		return f.Max, true
	}
	return f.Min, f.HasMin
}

// SourceOf returns the document that a figure was taken from; of a figure that
// nobody gives, the document of the row.
func (r *Ratings) SourceOf(symbol string) string {
	if f, ok := r.Figures[symbol]; ok {
		return f.Source
	}
	return r.Source
}
