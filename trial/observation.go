package trial

// Observations lists the codes that may stand in the place of a value that could not be read, in
// the order of their keys at the bench: stopped, hand loose, unreadable, not there, dropped.
func Observations() []string {
	return []string{"stopped", "hand", "unreadable", "not_there", "dropped"}
}
