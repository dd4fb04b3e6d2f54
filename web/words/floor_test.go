package words

import (
	"strings"
	"testing"

	"ratehouse/store"
	"ratehouse/trial/sheet"
)

func TestEveryReadingRefusalHasASentence(t *testing.T) {
	t.Parallel()
	for _, code := range store.RefusalCodes {
		if strings.HasPrefix(code, "number_") {
			continue // the codes of trial/sheet stand in their place
		}
		if faults[code] == nil {
			t.Errorf("no sentence for the refusal %q", code)
		}
	}
}

func TestEveryListRefusalHasASentence(t *testing.T) {
	t.Parallel()
	en := New(EN, nil)
	for code, n := range sheet.Codes() {
		args := []string{"«a»", "«b»", "«c»"}[:n]
		got := en.Say(ListRefusal(&sheet.Refusal{Line: 3, Code: code, Args: args}))
		if strings.Contains(got, string(code)+")") || strings.Contains(got, "{") {
			t.Errorf("%s: %q", code, got)
		}
		for _, a := range args {
			if !strings.Contains(got, a) {
				t.Errorf("%s does not name its argument %s: %q", code, a, got)
			}
		}
	}
}
