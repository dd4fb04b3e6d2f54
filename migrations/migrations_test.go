package migrations

import (
	"strings"
	"testing"
)

// Numbers without gaps: two branches that took the same number, or lost one, are noticed here.
func TestNumbers(t *testing.T) {
	t.Parallel()
	all, err := versions()
	if err != nil {
		t.Fatal(err)
	}
	if len(all) == 0 {
		t.Fatal("no migrations embedded")
	}
	for i, v := range all {
		if v != int64(i+1) {
			t.Errorf("migration %d has number %d", i+1, v)
		}
	}
}

func TestCompare(t *testing.T) {
	t.Parallel()
	for _, c := range []struct {
		had, want []int64
		says      string
	}{
		{[]int64{1, 2}, []int64{1, 2}, ""},
		{[]int64{1}, []int64{1, 2}, "lacks migration 2"},
		{[]int64{2}, []int64{1, 2}, "lacks migration 1"},
		{[]int64{1, 2, 3}, []int64{1, 2}, "newer version"},
	} {
		err := compare(c.had, c.want)
		if (err == nil) != (c.says == "") || err != nil && !strings.Contains(err.Error(), c.says) {
			t.Errorf("had %v, want %v: %v", c.had, c.want, err)
		}
	}
}
