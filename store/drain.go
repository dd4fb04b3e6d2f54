package store

// nudge tells a drain in this process that there is work; a drain elsewhere looks by itself.
func (l *Lab) nudge() {
	select {
	case l.wake <- struct{}{}:
	default:
	}
}
