package desk

import (
	"cmp"
	"net/http"
	"slices"
	"strconv"
	"strings"
	"time"

	"github.com/google/uuid"

	"ratehouse/store"
	"ratehouse/web/page"
	"ratehouse/web/words"
)

var correctLabels = []page.Label{{Name: "cell", Text: words.CorrectWhich}, {Name: "value", Text: words.CorrectValue}, {Name: "confirm", Text: words.CorrectAgain},
	{Name: "reason", Text: words.ReasonLabel}, {Name: "read_at", Text: words.CorrectReadAt}}

// correction is the form that replaces a reading; what stood stays on the sheet.
type correction struct {
	*page.Form
	again bool // the value is asked for once more, blind
}

// newCorrection is the form before anybody typed. Its number goes with the entry, so that sending it
// twice saves it once.
func newCorrection(c *page.Context, cell string) *correction {
	f := page.NewForm(c, correctLabels...)
	f.Set("id", uuid.Must(uuid.NewV7()).String())
	f.Set("cell", cell)
	return &correction{Form: f}
}

// correctable are the readings that stand, newest first, as choices.
func (v movementView) correctable() (options []page.Option) {
	if v.End != store.InTrial {
		return nil
	}
	for i := range v.Readings {
		if l := &v.Readings[i]; correctable(l) {
			options = append(options, page.Option{Value: cellOf(l), Text: v.cellText(l)})
		}
	}
	slices.Reverse(options)
	return options
}

func correctable(l *store.ReadingLine) bool {
	return !l.Replaced && (l.Kind == store.KindRate || l.Kind == store.KindState || l.Kind == store.KindLeft)
}

// cellOf names a reading in the address and the form: kind, round, and how many entries were seen.
func cellOf(l *store.ReadingLine) string {
	return string(l.Kind) + "." + itoa(l.Step) + "." + itoa(l.Nth)
}

func (v movementView) cellText(l *store.ReadingLine) string {
	value := words.Text(words.Seen(l.Code))
	switch {
	case l.Code != "":
	case l.Kind == store.KindRate:
		value = words.Raw(v.c.Unit(v.decimal(l.Value), v.c.Say(words.UnitSecondsPerDay)))
	default:
		value = words.Raw(v.c.Unit(v.decimal(l.Value), v.c.Say(words.UnitSeconds)))
	}
	says := words.CellState
	switch l.Kind {
	case store.KindRate:
		says = words.CellRate
	case store.KindLeft:
		says = words.CellLeft
	}
	return v.c.Say(says.With(l.Step, value))
}

// Correct replaces a reading by another value, with a reason. The instant stays the one of the reading
// unless another is given.
func (d *Desk) Correct(w http.ResponseWriter, r *http.Request) error {
	c, code, serial := page.Of(r), param(r, "code"), param(r, "serial")
	f, err := page.ReadForm(r, correctLabels...)
	if err != nil {
		return err
	}
	sheet, err := d.lab.MovementSheet(r.Context(), c.Actor, code, serial)
	if err != nil {
		return err
	}
	entry := d.entryOf(c, f, code, serial, sheet.Readings)
	cor := &correction{Form: f}
	if f.OK() {
		answers, err := d.lab.Save(r.Context(), c.Actor, time.Time{}, []store.Entry{entry})
		if err != nil {
			return err
		}
		if saved := cor.answered(c, answers[0]); saved {
			return page.Redirect(w, r, page.MovementURL(code, serial)+"#readings")
		}
	}
	return d.showMovement(w, r, serial, movementForms{correction: cor})
}

// entryOf reads the form; what is wrong with it is noted in it.
func (d *Desk) entryOf(c *page.Context, f *page.Form, code, serial string, lines []store.ReadingLine) store.Entry {
	e := store.Entry{Batch: code, Serial: serial, Step: -1, Day: -1, Method: store.Typed, Value: f.Get("value"), Reason: f.Get("reason"), Comma: c.Lang() != words.EN}
	i := slices.IndexFunc(lines, func(l store.ReadingLine) bool { return cellOf(&l) == f.Get("cell") })
	kind, at, _ := strings.Cut(f.Get("cell"), ".")
	step, base, _ := strings.Cut(at, ".")
	stepNo, errStep := strconv.Atoi(step)
	baseNo, errBase := strconv.Atoi(base)
	if i < 0 || cmp.Or(errStep, errBase) != nil {
		f.Wrong("cell", words.CorrectWhichNeeded)
	} else {
		e.Kind, e.Step, e.Base, e.ReadAt = store.ReadingKind(kind), stepNo, baseNo, lines[i].ReadAt
	}
	for _, needed := range []struct {
		name string
		why  words.Text
	}{{"value", words.CorrectValueNeeded}, {"reason", words.ReasonNeeded}} {
		if f.Get(needed.name) == "" {
			f.Wrong(needed.name, needed.why)
		}
	}
	if again := f.Get("read_at"); again != "" {
		t, err := c.ParseFieldInstant(again)
		if err != nil {
			f.Wrong("read_at", words.StartsAtForm)
		}
		e.ReadAt = t
	}
	id, err := uuid.Parse(f.Get("id"))
	if err != nil {
		id = uuid.Must(uuid.NewV7())
	}
	e.ID = id
	for _, again := range f.All("confirm") {
		if again = strings.TrimSpace(again); again != "" {
			e.Confirm = append(e.Confirm, again)
		}
	}
	return e
}

// answered notes what became of the entry and tells whether it is saved.
func (cor *correction) answered(c *page.Context, a store.Answer) bool {
	switch a.Status {
	case store.Accepted, store.Duplicate:
		return true
	case store.LookAgain:
		cor.again = true
	case store.Conflict:
		cor.Wrong("", words.CorrectConflict.With(a.Current.ReadBy, a.Current.Value, c.Stamp(a.Current.ReadAt)))
	default:
		cor.Wrong(fieldOf(a.Code), words.Refusal(a.Code, a.Args))
	}
	return false
}

// fieldOf is the field that a refusal is about.
func fieldOf(code string) string {
	switch code {
	case "future", "too_early", "read_at_order", "read_at_missing":
		return "read_at"
	case "reason_needed":
		return "reason"
	case "ended", "released", "id_reused", "base_ahead":
		return ""
	}
	return "value"
}
