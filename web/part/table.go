package part

// Cell is a number in a table.
type Cell struct {
	Text  string
	Mark  Mark // Fail: bold with bar and dot; Cannot: hollow dot; else plain
	Known bool // false: nothing there, said as "not read"
	Near  bool // worth a second look: underlined
}

func (c Cell) class() string {
	switch {
	case !c.Known && c.Mark == Cannot:
		return "num nil cannot"
	case !c.Known:
		return "num nil"
	case c.Mark == Fail:
		return "num out"
	case c.Mark == Cannot:
		return "num cannot"
	case c.Near:
		return "num near"
	}
	return "num"
}

// Column is the head of a column that can be sorted by.
type Column struct {
	Label, Unit string
	Num         bool
	URL         string // sorts by this column, or turns the order; "" cannot be sorted
	Order       string // "ascending" or "descending" when sorted by it, else ""
}

// Empty is what stands in place of a table without rows: what it will hold, why it is empty, and the
// one act that fills it.
type Empty struct {
	Title, Text  string
	ActText, Act string // label and address; "" for none
}

// Ruler is progress: so much of so much, with the numbers in words below.
type Ruler struct {
	Done, Whole int
	Label       string // for screen readers: what is counted
	Text        string // below; "" says "23 of 39 read"
	Live        bool   // still running: purple
}
