package trial

// Sizes of the two categories of wrist-chronometers, in micrometres and square micrometres.
// The area is the truncated figure of the published tables, so the area of a round movement is
// never computed: a round 20.00 mm movement would land in category 1.
const (
	smallDiameterUM = 20_000
	smallAreaUM2    = 314_000_000
)

// SizeCategory is the category of a movement by its size: "1" above 20 mm of diameter, for
// shaped movements above 314 mm² of area, else "2". Exactly one of the two is given, the other
// is 0. Source: published descriptions of ISO 3159 (domain notes 1.2, reading R2).
func SizeCategory(diameterUM int, areaUM2 int64) string {
	if diameterUM > smallDiameterUM || areaUM2 > smallAreaUM2 {
		return "1"
	}
	return "2"
}
