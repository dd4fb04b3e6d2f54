package floor

import (
	"errors"
	"io"
	"net/http"
	"slices"
	"strings"
	"time"
	"unicode/utf16"

	"ratehouse/store"
	"ratehouse/trial"
	"ratehouse/trial/sheet"
	"ratehouse/web/page"
	"ratehouse/web/part"
	"ratehouse/web/words"
)

// registerView is the page on which a batch is registered.
type registerView struct {
	sheet      page.Sheet
	form       *page.Form
	programmes []page.Option
	categories []page.Option
	calibres   []page.Option
	depositors []page.Option
	types      []typeOption
	wind       string // what the programmes want before round 0
	lift       bool   // offers to test certified numbers again
	first      string // fault of the numbers
	preview    preview
}

// typeOption is a holder type to choose, with its picture.
type typeOption struct {
	page.Option
	picture part.Holder
}

// preview says what registering would make of the list.
type preview struct {
	pieces, holders string // counts in words; "" while there is no list
	span            string
	faults          []string
	more            string
	good            bool
}

var registerLabels = []page.Label{
	{Name: "code", Text: words.BatchCode}, {Name: "programme", Text: words.Programme}, {Name: "calibre", Text: words.Calibre},
	{Name: "category", Text: words.Category}, {Name: "depositor", Text: words.Depositor}, {Name: "starts_at", Text: words.StartsAt},
	{Name: "entry", Text: words.EntryLabel}, {Name: "over_24h", Text: words.Over24hLabel}, {Name: "holder_type", Text: words.HolderTypeLabel},
	{Name: "serials", Text: words.SerialNumbers}, {Name: "file", Text: words.NumbersFile}, {Name: "delivery_note", Text: words.DeliveryNote},
	{Name: "order_number", Text: words.OrderNumber}, {Name: "condition", Text: words.ConditionLabel}, {Name: "lift_reason", Text: words.LiftLabel},
}

// faultsMost is how many faulty lines of a list are named; the others are counted.
const faultsMost = 20

// NewBatch shows the empty form.
func (f *Floor) NewBatch(w http.ResponseWriter, r *http.Request) error {
	c := page.Of(r)
	form := page.NewForm(c, registerLabels...)
	free, err := f.lab.FreeBatchCode(r.Context(), c.Actor, c.Now.In(c.Zone()).Format("06")+"-000")
	if err != nil {
		return err
	}
	y, m, d := c.Now.In(c.Zone()).Date()
	form.Set("code", free)
	form.Set("starts_at", c.FieldInstant(time.Date(y, m, d+1, 8, 0, 0, 0, c.Zone())))
	form.Set("entry", string(store.EntryState))
	form.Set("holder_type", "TRAY10")
	v, err := f.viewRegister(r, form)
	if err != nil {
		return err
	}
	return page.Render(w, r, http.StatusOK, registerPage(c, v))
}

// RegisterBatch registers a batch, or checks its list when that was asked for.
func (f *Floor) RegisterBatch(w http.ResponseWriter, r *http.Request) error {
	c := page.Of(r)
	form, err := page.ReadForm(r, registerLabels...)
	if err != nil {
		return err
	}
	in := &intake{c: c, form: form}
	if err := in.read(r); err != nil {
		return err
	}
	if form.Has("check") {
		return f.checkBatch(w, r, in)
	}
	if err = in.refuse(); err == nil && form.OK() {
		var made store.Batch
		if made, err = f.lab.Register(r.Context(), c.Actor, in.batch); err == nil {
			return page.Redirect(w, r, page.BatchURL(made.Code))
		}
	} else {
		err = errors.Join(err, f.lab.CheckBatch(r.Context(), c.Actor, in.batch)) // all faults at once
	}
	if err := f.takeFaults(r, in, err); err != nil {
		return err
	}
	v, verr := f.viewRegister(r, form)
	if verr != nil {
		return verr
	}
	v.preview, v.first = in.preview(err, v.types), in.first
	v.lift = v.lift || in.certified && c.Actor.May(store.RightRelease)
	return page.Render(w, r, form.Status(), registerPage(c, v))
}

// checkBatch shows what would be registered, without the faults of the fields around the list.
func (f *Floor) checkBatch(w http.ResponseWriter, r *http.Request, in *intake) error {
	err := f.lab.CheckBatch(r.Context(), in.c.Actor, in.batch)
	if err != nil && store.KindOf(err) == store.KindFault {
		return err
	}
	clean := page.NewForm(in.c, registerLabels...)
	for _, l := range registerLabels {
		if l.Name != "file" {
			clean.Set(l.Name, in.form.Raw(l.Name))
		}
	}
	v, verr := f.viewRegister(r, clean)
	if verr != nil {
		return verr
	}
	v.preview = in.preview(err, v.types)
	return page.Render(w, r, http.StatusOK, registerPage(in.c, v))
}

// intake is a posted form turned into a batch.
type intake struct {
	c         *page.Context
	form      *page.Form
	batch     store.NewBatch
	lines     []*sheet.Refusal // of the list
	certified bool
	first     string // fault of the list
}

func (in *intake) read(r *http.Request) error {
	f := in.form
	in.batch = store.NewBatch{Code: f.Get("code"), Programme: f.Get("programme"), Category: f.Get("category"), Calibre: f.Get("calibre"),
		Depositor: f.Get("depositor"), Entry: store.EntryKind(f.Get("entry")), HolderType: f.Get("holder_type"), DeliveryNote: f.Get("delivery_note"),
		OrderNumber: f.Get("order_number"), Condition: f.Get("condition"), LiftReason: f.Get("lift_reason"), Over24h: f.Get("over_24h") == "yes"}
	if in.batch.DeliveryNote != "" || in.batch.Condition != "" {
		in.batch.ReceivedAt = in.c.Now
	}
	in.batch.StartsAt = in.start()
	list, err := in.list(r)
	if err != nil {
		return err
	}
	in.batch.Pieces, in.lines, err = store.PiecesOf(list)
	if whole, ok := errors.AsType[*sheet.Refusal](err); ok {
		in.lines, err = append(in.lines, whole), nil
	}
	if strings.TrimSpace(list) == "" {
		in.lines = nil // said as a missing field
	}
	return err
}

// start reads the due instant of round 0 in the house's time zone.
func (in *intake) start() time.Time {
	text := strings.Join(strings.Fields(strings.Replace(in.form.Get("starts_at"), "T", " ", 1)), " ")
	if text == "" {
		return time.Time{}
	}
	at, err := in.c.ParseFieldInstant(text)
	if err != nil {
		in.form.Wrong("starts_at", words.StartsAtForm)
		return time.Time{}
	}
	if is := in.c.FieldInstant(at); is != text {
		in.form.Wrong("starts_at", words.StartsAtGap.With(is))
	}
	return at
}

// list is the intake list, pasted or uploaded. A file's text goes into the field, so that it can be
// corrected there: a file is never sent back to a browser.
func (in *intake) list(r *http.Request) (string, error) {
	pasted := in.form.Raw("serials")
	file, _, err := r.FormFile("file")
	if err != nil {
		return pasted, nil // none was chosen
	}
	defer file.Close()
	data, err := io.ReadAll(file)
	if err != nil {
		return "", err
	}
	text := decode(data)
	if strings.TrimSpace(pasted) != "" && strings.TrimSpace(text) != "" {
		in.form.Wrong("file", words.NumbersTwice)
		return pasted, nil
	}
	if text != "" {
		in.form.Set("serials", text)
		return text, nil
	}
	return pasted, nil
}

// decode makes UTF-8 of a file in UTF-16 with a byte order mark, so that it can be shown in a field;
// everything else is for the reader of the list to accept or refuse.
func decode(data []byte) string {
	if len(data) < 2 || data[0] != 0xFE && data[0] != 0xFF || data[0] == data[1] || data[0]+data[1] != 0xFD {
		return strings.TrimPrefix(string(data), "\ufeff")
	}
	units := make([]uint16, 0, len(data)/2)
	for i := 2; i+1 < len(data); i += 2 {
		hi, lo := data[i], data[i+1]
		if data[0] == 0xFF {
			hi, lo = lo, hi
		}
		units = append(units, uint16(hi)<<8|uint16(lo))
	}
	return string(utf16.Decode(units))
}

// refuse checks what the verb does not know: lines that could not be read, and rates that are none.
func (in *intake) refuse() error {
	if in.batch.Entry == store.EntryRate && !in.batch.Over24h {
		in.form.Wrong("over_24h", words.Over24hNeeded)
	}
	if len(in.lines) > 0 {
		return errLines
	}
	return nil
}

// errLines: the list has lines that cannot be read; they are named one by one.
var errLines = errors.New("lines of the list were refused")

// takeFaults writes every fault beside its field; a fault of ours comes back.
func (f *Floor) takeFaults(r *http.Request, in *intake, err error) error {
	var list []*store.Error
	if e, ok := errors.AsType[*store.Error](err); ok {
		list = e.All()
	}
	if store.KindOf(err) == store.KindForbidden {
		return err
	}
	if len(list) == 0 && !errors.Is(err, errLines) && in.form.OK() {
		return err
	}
	lines := in.lineFaults()
	for _, e := range list {
		switch {
		case e.Field == "serials" && (e.Code != "needed" || len(in.lines) == 0):
			in.certified = in.certified || e.Code == "already_certified"
			lines = append(lines, words.Refusal(e.Code, e.Args))
		case e.Field == "serials", e.Field == "starts_at" && in.form.Field("starts_at").Why != "":
		case e.Code == "batch_code_taken":
			free, err := f.lab.FreeBatchCode(r.Context(), in.c.Actor, in.batch.Code)
			if err != nil {
				return err
			}
			in.form.Wrong("code", words.CodeTaken.With(in.batch.Code, free))
		case e.Code == "code_form":
			in.form.Wrong(e.Field, codeForm(e))
		default:
			in.form.Wrong(e.Field, words.Refusal(e.Code, e.Args))
		}
	}
	for i, l := range lines {
		if i == 0 {
			in.first = in.c.Say(l)
		}
		if i == faultsMost {
			in.form.Wrong("serials", words.MoreFaults.With(len(lines)-faultsMost))
			break
		}
		in.form.Wrong("serials", l)
	}
	return nil
}

// lineFaults says what is wrong with lines that could not be read.
func (in *intake) lineFaults() (list []words.Text) {
	for _, l := range in.lines {
		list = append(list, words.LineFault.With(l.Line, words.ListRefusal(l)))
	}
	return list
}

// codeForm suggests the code that was probably meant.
func codeForm(e *store.Error) words.Text {
	typed := e.Args["code"]
	better := strings.Map(func(r rune) rune {
		switch {
		case r >= 'A' && r <= 'Z', r >= '0' && r <= '9', r == '.', r == '_', r == '-':
			return r
		case r == ' ' || r == '/' || r == ':':
			return '-'
		}
		return -1
	}, strings.ToUpper(strings.TrimSpace(typed)))
	better = strings.TrimLeft(better, "._-")
	if better == "" || better == typed || len(better) > 40 || better == "NEW" {
		return words.Refusal(e.Code, e.Args)
	}
	return words.CodeLike.With(typed, better)
}

// preview says what the list would become: how many pieces in how many holders, or what is wrong.
func (in *intake) preview(err error, types []typeOption) preview {
	var v preview
	n := len(in.batch.Pieces)
	faults := in.lineFaults()
	if e, ok := errors.AsType[*store.Error](err); ok {
		for _, one := range e.All() {
			if one.Field == "serials" && one.Code != "needed" {
				faults = append(faults, words.Refusal(one.Code, one.Args))
			}
		}
	}
	if n == 0 && len(faults) == 0 {
		return v
	}
	v.pieces = in.c.Say(words.Movements.With(n))
	if n > 0 {
		v.span = in.c.Say(words.PreviewFirst.With(in.batch.Pieces[0].Serial, in.batch.Pieces[n-1].Serial))
	}
	for _, t := range types {
		if t.Value == in.batch.HolderType {
			v.holders = in.c.Say(words.PreviewHolders.With(holdersFor(in.batch.Pieces, seats(t.picture)), t.Value))
		}
	}
	for i, f := range faults {
		if i == faultsMost {
			v.more = in.c.Say(words.MoreFaults.With(len(faults) - faultsMost))
			break
		}
		v.faults = append(v.faults, in.c.Say(f))
	}
	v.good = len(faults) == 0
	return v
}

func seats(h part.Holder) (n int) {
	for _, p := range h.Places {
		if p.State != part.PlaceBlocked {
			n++
		}
	}
	return n
}

// holdersFor is how many holders of so many places the pieces lie in.
func holdersFor(pieces []store.Piece, places int) int {
	last := len(pieces)
	for _, p := range pieces {
		last = max(last, p.Place)
	}
	return (last + places - 1) / max(places, 1)
}

func (f *Floor) viewRegister(r *http.Request, form *page.Form) (registerView, error) {
	c, ctx := page.Of(r), r.Context()
	v := registerView{form: form, sheet: page.Sheet{Title: c.Say(words.RegisterTitle), Sub: c.Say(words.RegisterSub), Nav: page.BatchesURL, Floor: true, Styles: styles,
		Back: &page.Link{Text: c.Say(words.NavBatches), URL: page.BatchesURL}, Scripts: []string{"intake.js"}}}
	programmes, err := f.lab.Programmes(ctx, c.Actor)
	if err != nil {
		return v, err
	}
	calibres, err := f.lab.Calibres(ctx, c.Actor)
	if err != nil {
		return v, err
	}
	depositors, err := f.lab.Depositors(ctx, c.Actor)
	if err != nil {
		return v, err
	}
	types, err := f.lab.HolderTypes(ctx, c.Actor)
	if err != nil {
		return v, err
	}
	v.offer(c, programmes)
	for _, k := range calibres {
		v.calibres = append(v.calibres, page.Option{Value: k.Code, Text: k.Title})
	}
	for _, d := range depositors {
		v.depositors = append(v.depositors, page.Option{Value: d.Code, Text: d.Title})
	}
	for _, t := range types {
		if t.Carries == "movements" {
			v.types = append(v.types, optionOf(c, t))
		}
	}
	v.lift = form.Raw("lift_reason") != ""
	return v, nil
}

// offer lists the newest version of each programme, the categories they know, and what each wants
// before round 0.
func (v *registerView) offer(c *page.Context, programmes []*trial.Programme) {
	v.categories = []page.Option{{Value: "", Text: c.Say(words.CategoryByCard)}}
	for _, p := range programmes {
		if slices.ContainsFunc(v.programmes, func(o page.Option) bool { return o.Value == p.Code }) {
			continue
		}
		v.programmes = append(v.programmes, page.Option{Value: p.Code, Text: c.Say(words.ProgrammeOption.With(p.Code, p.Version, p.Title))})
		for _, k := range p.Categories {
			if !slices.ContainsFunc(v.categories, func(o page.Option) bool { return o.Value == k.Code }) {
				v.categories = append(v.categories, page.Option{Value: k.Code, Text: c.Say(words.CategoryOption.With(k.Code, k.Title))})
			}
		}
		if p.Conditioning.Wind && p.Conditioning.MinHours > 0 {
			v.wind = strings.TrimSpace(v.wind + " " + c.Say(words.WindBy.With(p.Code, c.Celsius(p.Conditioning.TemperatureC.String()), p.Conditioning.MinHours)))
		}
	}
}

func optionOf(c *page.Context, t store.HolderType) typeOption {
	h := part.Holder{Code: t.Code, Rows: t.Rows, Cols: t.Columns}
	for n := 1; n <= t.Rows*t.Columns; n++ {
		row, col := t.At(n)
		p := part.HolderPlace{N: c.Count(n), Row: row, Col: col, State: part.PlaceEmpty}
		if slices.Contains(t.Blocked, n) {
			p.State = part.PlaceBlocked
		}
		h.Places = append(h.Places, p)
	}
	size := words.RowsByColumns.With(t.Rows, t.Columns)
	return typeOption{page.Option{Value: t.Code, Text: c.Say(words.HolderTypeSize.With(t.Title, words.HolderPlaces.With(len(t.Places())), size))}, h}
}

// serials is the field of the numbers, with its first fault; the others stand in the summary at the top.
func (v registerView) serials() page.Field {
	d := v.form.Field("serials")
	if v.first != "" {
		d.Why = v.first
	}
	return d
}

func (v registerView) entryOptions(c *page.Context) []page.Option {
	return []page.Option{{Value: string(store.EntryState), Text: c.Say(words.EntryStateText)}, {Value: string(store.EntryRate), Text: c.Say(words.EntryRateText)}}
}

func (v registerView) deliveryOpen() bool {
	return v.form.Raw("delivery_note")+v.form.Raw("order_number")+v.form.Raw("condition") != ""
}
