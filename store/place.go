package store

// At is where a place of the holder lies as it is drawn, row and column from 1 at the top left: places
// are counted from the origin corner along rows or columns.
func (t HolderType) At(place int) (row, col int) {
	i := place - 1
	row, col = i/t.Columns, i%t.Columns
	if t.Along == "columns" {
		row, col = i%t.Rows, i/t.Rows
	}
	if t.Origin == "bottom_left" || t.Origin == "bottom_right" {
		row = t.Rows - 1 - row
	}
	if t.Origin == "top_right" || t.Origin == "bottom_right" {
		col = t.Columns - 1 - col
	}
	return row + 1, col + 1
}
