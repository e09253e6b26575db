package system

// Hung is what hangs along the glass: Roller and Slats.
type Hung interface {
	// hung is the position and the place on its side of the opening's plane,
	// whether drawn or not.
	hung(r Rect) (position string, z zone)
}

// hung leaves the slats room to turn.
func (s Slats) hung(Rect) (position string, z zone) {
	near := s.GapM
	if s.Position == Inside {
		near += s.CavityM
	}
	if s.Position == Between {
		near = 0
	}
	return s.Position, zone{near, near + s.WidthM, s.LowM, s.HighM}
}

// Clash returns an error where two hung things are in each other's way, drawn
// or not.
func Clash(a, b Hung, r Rect) error {
	pa, za := a.hung(r)
	pb, zb := b.hung(r)
	if pa != pb {
		return nil
	}
	if pa != Between && (za.farM < zb.nearM-touchM || zb.farM < za.nearM-touchM) || za.lowM > zb.highM-touchM || zb.lowM > za.highM-touchM {
		return nil
	}
	return dimension("gap", "reaches from %.4g to %.4g m from the plane of the glass, %s, where another one of this opening reaches from %.4g to %.4g m; want them one behind the other", za.nearM, za.farM, pa, zb.nearM, zb.farM)
}

// Meets returns an error, which says what would be clear, where the slats or
// the room they need to turn run into the part of the shelf on their side of
// the glass.
func (s Slats) Meets(shelf LightShelf, r Rect) error {
	if s.Position == Between {
		return nil
	}
	_, z := s.hung(r)
	high, ok, err := shelf.meets(r, s.Position == Outside, z)
	if err != nil || !ok {
		return err
	}
	return dimension("low", "the slats reach down to %.4g m above the opening's lower edge, into the shelf, whose top is at %.4g m; want them to end above it, or a gap larger than the shelf's reach", s.LowM, high)
}
