package store

import (
	"context"
	"fmt"
	"slices"
	"strconv"
	"strings"
	"time"
	"unicode"
	"unicode/utf8"

	"github.com/google/uuid"
	"github.com/jackc/pgx/v5"

	"ratehouse/store/rows"
	"ratehouse/trial"
	"ratehouse/trial/sheet"
)

// EntryKind is how a batch is normally read; each reading still says how it was taken.
type EntryKind string

// The kinds of entry.
const (
	EntryRate  EntryKind = "rate"
	EntryState EntryKind = "state"
	EntryHand  EntryKind = "hand"
	EntryTap   EntryKind = "tap"
)

// Piece is one line of an intake list: a number, and the place it takes counted over all holders
// in order (0: the next free one). Line is where it stood in the list, for its faults; 0: its rank.
type Piece struct {
	Serial string
	Place  int
	Line   int
}

// NewBatch is a batch to register.
type NewBatch struct {
	Code       string
	Programme  string // code; its newest version is taken
	Category   string // may be empty if the calibre's card says it
	Calibre    string // code; may be empty if the category is given
	Depositor  string // code
	StartsAt   time.Time
	Entry      EntryKind
	HolderType string // code; empty: the first of the standard ones
	Pieces     []Piece

	DeliveryNote, OrderNumber, Condition, Language string
	ReceivedAt                                     time.Time
	LiftReason                                     string // the QA lead lifts the stop for already certified numbers
	Over24h                                        bool   // who registers a rate batch says: rates are differences of states over 24 h (practice notes E16)
}

// Batch is a batch as everybody sees it.
type Batch struct {
	ID        uuid.UUID
	Code      string
	Programme *trial.Programme
	Hash      [32]byte // of the programme
	Category  string
	Entry     EntryKind
	StartsAt  time.Time
	Depositor Depositor
	Calibre   Calibre // zero if not given
	Steps     []trial.Step
	Size      int

	DeliveryNote, OrderNumber, Condition, Language string
	ReceivedAt                                     time.Time
}

// Due is the planned instant of round k: a trial day is 24 h elapsed, whatever summer time does.
func (b *Batch) Due(k int) time.Time {
	return b.StartsAt.Add(time.Duration(k) * time.Duration(b.Programme.Reading.IntervalS) * time.Second)
}

// LastStep is the number of the last round.
func (b *Batch) LastStep() int { return len(b.Steps) - 1 }

// most movements in one batch: their numbers are small integers.
const mostPieces = 30_000

// Register takes in a batch: checks everything, lays the movements into free holders in order,
// and makes what the rounds will need. All faults of the form are told at once.
func (l *Lab) Register(ctx context.Context, a Actor, n NewBatch) (Batch, error) {
	var made Batch
	err := l.register(ctx, a, n, func(r *registration) { made = r.queue() })
	return made, err
}

// CheckBatch tells what Register would refuse, and writes nothing.
func (l *Lab) CheckBatch(ctx context.Context, a Actor, n NewBatch) error {
	return l.register(ctx, a, n, func(r *registration) { r.skip = true })
}

func (l *Lab) register(ctx context.Context, a Actor, n NewBatch, then func(*registration)) error {
	n.tidy()
	return l.do(ctx, a, verb{"register_batch", RightRegister}, func(w *work) error {
		r := &registration{work: w, NewBatch: n}
		if err := r.look(ctx); err != nil {
			return err
		}
		if err := r.check(); err != nil {
			return err
		}
		then(r)
		return nil
	})
}

// FreeBatchCode is the next code in the manner of the one given that no batch has yet: the number at
// its end counted on ("26-118" to "26-126"), or one put there.
func (l *Lab) FreeBatchCode(ctx context.Context, a Actor, code string) (string, error) {
	if !a.May(RightRegister) {
		return "", failure(KindForbidden, "not_allowed", "right", string(RightRegister))
	}
	stem := strings.TrimRight(code, "0123456789")
	last, err := rows.LastBatchNumber(ctx, l.pool, l.site, stem)
	if err != nil {
		return "", fmt.Errorf("batch codes like %s: %w", code, err)
	}
	return stem + fmt.Sprintf("%0*d", len(code)-len(stem), last+1), nil
}

func (n *NewBatch) tidy() {
	for _, s := range []*string{&n.Code, &n.Programme, &n.Category, &n.Calibre, &n.Depositor, &n.HolderType, &n.DeliveryNote, &n.OrderNumber, &n.Condition} {
		*s = strings.TrimSpace(*s)
	}
	if n.HolderType == "" {
		n.HolderType = standardTypes[1].Code
	}
	n.StartsAt = n.StartsAt.UTC().Truncate(time.Second)
}

// registration gathers what Register finds on its way.
type registration struct {
	*work
	NewBatch
	programmes []rows.Programme
	depositors []rows.Depositor
	calibres   []rows.Calibre
	types      []rows.HolderType
	same       []rows.Batch
	earlier    []rows.Earlier
	free       []rows.Holder
	lastHolder int
	programme  *trial.Programme
	holderType HolderType
}

func (r *registration) look(ctx context.Context) error {
	l, b := r.lab, &pgx.Batch{}
	rows.FindProgramme(b, &r.programmes, l.site, r.Programme)
	rows.FindDepositor(b, &r.depositors, l.site, r.Depositor)
	rows.FindCalibre(b, &r.calibres, l.site, r.Calibre)
	rows.FindHolderType(b, &r.types, l.site, r.HolderType)
	rows.FindBatch(b, &r.same, l.site, r.Code)
	if err := r.read(ctx, b); err != nil {
		return err
	}
	if len(r.types) == 1 {
		r.holderType = holderTypeOf(r.types[0])
	}
	if len(r.programmes) == 1 {
		var err error
		if r.programme, err = l.learn(r.programmes[0]); err != nil {
			return err
		}
	}
	return r.lookFurther(ctx)
}

// lookFurther asks what depends on the first answers: earlier appearances and free holders.
func (r *registration) lookFurther(ctx context.Context) error {
	b := &pgx.Batch{}
	if len(r.depositors) == 1 {
		serials := make([]string, len(r.Pieces))
		for i, p := range r.Pieces {
			serials[i] = p.Serial
		}
		var calibre *uuid.UUID
		if len(r.calibres) == 1 {
			calibre = &r.calibres[0].ID
		}
		rows.EarlierPieces(b, &r.earlier, r.depositors[0].ID, calibre, serials)
	}
	rows.FreeHolders(b, &r.free, r.lab.site, r.HolderType, len(r.Pieces))
	rows.LastHolder(b, &r.lastHolder, r.lab.site, r.HolderType)
	return r.read(ctx, b)
}

func (r *registration) check() error {
	var f faults
	f.add(checkCode("code", r.Code))
	if len(r.same) > 0 {
		f.add(invalid("code", "batch_code_taken", "code", r.Code))
	}
	if r.Programme == "" {
		f.add(invalid("programme", "needed"))
	} else if r.programme == nil {
		f.add(invalid("programme", "unknown_programme", "code", r.Programme))
	}
	f.add(checkCode("depositor", r.Depositor))
	if r.Calibre != "" {
		f.add(checkCode("calibre", r.Calibre))
	}
	f.add(r.checkCategory())
	if r.Entry != EntryRate && r.Entry != EntryState && r.Entry != EntryHand && r.Entry != EntryTap {
		f.add(invalid("entry", "unknown_entry", "entry", string(r.Entry)))
	}
	if r.StartsAt.Year() < 2000 {
		f.add(invalid("starts_at", "needed"))
	}
	if len(r.types) == 0 || r.holderType.Carries != "movements" || len(r.holderType.Places()) == 0 {
		f.add(invalid("holder_type", "unknown_holder_type", "code", r.HolderType))
	}
	r.checkPieces(&f)
	return f.err()
}

// checkCategory completes the category from the calibre's card, and refuses a contradiction.
func (r *registration) checkCategory() *Error {
	card := ""
	if len(r.calibres) == 1 {
		card = calibreOf(r.calibres[0]).Category()
	}
	switch {
	case r.Category == "" && card == "":
		return invalid("category", "category_needed")
	case r.Category == "":
		r.Category = card
	case card != "" && r.programme != nil && r.programme.HasCategory(card) && card != r.Category:
		return invalid("category", "category_contradicts_calibre", "category", r.Category, "calibre", r.Calibre, "card", card)
	}
	if r.programme != nil && !r.programme.HasCategory(r.Category) {
		return invalid("category", "unknown_category", "category", r.Category)
	}
	return nil
}

func (r *registration) checkPieces(f *faults) {
	switch {
	case len(r.Pieces) == 0:
		f.add(invalid("serials", "needed"))
	case len(r.Pieces) > mostPieces:
		f.add(invalid("serials", "too_many_pieces", "most", strconv.Itoa(mostPieces)))
	}
	seen, places := map[string]int{}, map[int]int{}
	for i, p := range r.Pieces {
		line := p.Line
		if line == 0 {
			line = i + 1
		}
		f.add(checkSerial(p.Serial, line))
		if first, ok := seen[p.Serial]; ok {
			f.add(invalid("serials", "serial_repeated", "serial", p.Serial, "line", strconv.Itoa(line), "first", strconv.Itoa(first)))
		} else {
			seen[p.Serial] = line
		}
		if first, ok := places[p.Place]; ok && p.Place != 0 {
			f.add(invalid("serials", "place_repeated", "place", strconv.Itoa(p.Place), "line", strconv.Itoa(line), "first", strconv.Itoa(first)))
		}
		places[p.Place] = line
		if p.Place < 0 || p.Place > mostPieces {
			f.add(invalid("serials", "place_out_of_range", "place", strconv.Itoa(p.Place), "line", strconv.Itoa(line)))
		}
	}
	for _, e := range r.earlier {
		if e.Certificate != nil && (r.LiftReason == "" || !r.actor.May(RightRelease)) {
			f.add(invalid("serials", "already_certified", "serial", e.Serial, "batch", e.Batch, "certificate", *e.Certificate))
		}
	}
}

// checkSerial refuses numbers that a spreadsheet would take for a formula, or that cannot be seen.
func checkSerial(s string, line int) *Error {
	at := strconv.Itoa(line)
	switch {
	case s == "":
		return invalid("serials", "serial_empty", "line", at)
	case utf8.RuneCountInString(s) > 64:
		return invalid("serials", "serial_long", "line", at, "most", "64")
	case strings.ContainsRune("=+-@", rune(s[0])):
		return invalid("serials", "serial_formula", "serial", s, "line", at)
	case !utf8.ValidString(s) || strings.ContainsFunc(s, func(c rune) bool { return !unicode.IsPrint(c) }):
		return invalid("serials", "serial_unprintable", "serial", strconv.QuoteToASCII(s), "line", at)
	}
	return nil
}

func (r *registration) queue() Batch {
	l, act := r.lab, r.act.ID
	n := rows.NewBatch{ID: l.newID(), Site: l.site, Code: r.Code, Programme: r.programmes[0].Hash, Category: r.Category, Entry: string(r.Entry),
		StartsAt: r.StartsAt, DeliveryNote: optional(r.DeliveryNote), OrderNumber: optional(r.OrderNumber), Condition: optional(r.Condition),
		Language: optional(r.Language), Act: act}
	if !r.ReceivedAt.IsZero() {
		n.ReceivedAt, n.ReceivedBy = &r.ReceivedAt, &r.actor.Account
	}
	n.Depositor = r.depositor()
	n.Calibre = r.calibre()
	pieces := r.lay()
	steps := max(len(r.programme.Days), r.programme.Recovery.MaxTotalDays) + 1
	r.batch(n.ID)
	r.act.Reason = optional(r.LiftReason)
	r.act.Body = r.body(n, pieces)
	rows.QueueBatch(r.out, n, len(r.programme.Days))
	rows.QueuePieces(r.out, n, pieces, steps, r.now)
	return Batch{ID: n.ID, Code: n.Code, Programme: r.programme, Hash: [32]byte(n.Programme), Category: n.Category, Entry: r.Entry, StartsAt: n.StartsAt,
		Depositor: Depositor{ID: n.Depositor, Code: r.Depositor}, Steps: plannedSteps(r.programme), Size: len(pieces)}
}

// depositor is the one named, made on the spot when this is its first batch: the box is here, and
// its card can be completed later.
func (r *registration) depositor() uuid.UUID {
	if len(r.depositors) == 1 {
		return r.depositors[0].ID
	}
	id := r.lab.newID()
	rows.QueueDepositor(r.out, rows.Depositor{ID: id, Site: r.lab.site, Code: r.Depositor, Title: r.Depositor, Act: r.act.ID})
	return id
}

func (r *registration) calibre() *uuid.UUID {
	if r.Calibre == "" {
		return nil
	}
	if len(r.calibres) == 1 {
		return &r.calibres[0].ID
	}
	id := r.lab.newID()
	rows.QueueCalibre(r.out, id, r.lab.site, r.Calibre, r.act.ID)
	return &id
}

// lay gives every piece its number, attempt and place; missing holders are made.
func (r *registration) lay() []rows.Piece {
	attempts := map[string]int16{}
	for _, e := range r.earlier {
		attempts[e.Serial] = max(attempts[e.Serial], e.Attempt)
	}
	seats := r.holderType.Places()
	taken := map[int]bool{}
	for _, p := range r.Pieces {
		taken[p.Place] = true
	}
	pieces, next := make([]rows.Piece, len(r.Pieces)), 1
	for i, p := range r.Pieces {
		at := p.Place
		if at == 0 {
			for taken[next] {
				next++
			}
			at, next = next, next+1
		}
		holder := r.holder((at - 1) / len(seats))
		pieces[i] = rows.Piece{No: int16(i + 1), Serial: p.Serial, Attempt: attempts[p.Serial] + 1, Holder: holder, Place: int16(seats[(at-1)%len(seats)])}
	}
	return pieces
}

func (r *registration) holder(i int) uuid.UUID {
	for len(r.free) <= i {
		r.lastHolder++
		h := rows.Holder{ID: r.lab.newID(), Code: fmt.Sprintf("%s-%04d", r.HolderType, r.lastHolder), Type: r.HolderType}
		rows.QueueHolder(r.out, r.lab.site, h, r.act.ID)
		r.free = append(r.free, h)
	}
	return r.free[i].ID
}

func (r *registration) body(n rows.NewBatch, pieces []rows.Piece) map[string]any {
	list := make([]any, len(pieces))
	for i, p := range pieces {
		list[i] = []any{int(p.No), p.Serial, int(p.Attempt), p.Holder.String(), int(p.Place)}
	}
	return map[string]any{"batch": n.ID.String(), "code": n.Code, "programme": fmt.Sprintf("%x", n.Programme), "category": n.Category,
		"entry": n.Entry, "over_24h": r.Over24h, "depositor": n.Depositor.String(), "calibre": r.Calibre, "starts_at": n.StartsAt.Format(time.RFC3339), "pieces": list}
}

func plannedSteps(p *trial.Programme) []trial.Step {
	steps := make([]trial.Step, len(p.Days)+1)
	for k := range steps {
		steps[k].Day = k
	}
	return steps
}

func (l *Lab) batchOf(ctx context.Context, db rows.Reader, r rows.Batch) (Batch, error) {
	p, err := l.programme(ctx, db, r.Programme)
	if err != nil {
		return Batch{}, err
	}
	b := Batch{ID: r.ID, Code: r.Code, Programme: p, Hash: [32]byte(r.Programme), Category: r.Category, Entry: EntryKind(r.Entry), StartsAt: r.StartsAt.UTC(),
		Depositor: Depositor{ID: r.Depositor, Code: r.DepositorCode, Title: r.DepositorTitle}, Size: int(r.Size),
		DeliveryNote: value(r.DeliveryNote), OrderNumber: value(r.OrderNumber), Condition: value(r.Condition), Language: value(r.Language),
		ReceivedAt: value(r.ReceivedAt)}
	if r.Calibre != nil {
		b.Calibre = Calibre{ID: *r.Calibre, Code: value(r.CalibreCode), Title: value(r.CalibreTitle), DialHours: max(12, int(value(r.DialHours)))}
	}
	for _, d := range r.Days {
		b.Steps = append(b.Steps, trial.Step{Day: int(value(d))})
	}
	return b, nil
}

// Batch is one batch without its movements.
func (l *Lab) Batch(ctx context.Context, a Actor, code string) (Batch, error) {
	if !a.May(RightBatches) {
		return Batch{}, failure(KindForbidden, "not_allowed", "right", string(RightBatches))
	}
	var found []rows.Batch
	b := &pgx.Batch{}
	rows.FindBatch(b, &found, l.site, code)
	if err := rows.Run(ctx, l.pool, b); err != nil {
		return Batch{}, fmt.Errorf("batch %s: %w", code, err)
	}
	if len(found) == 0 {
		return Batch{}, failure(KindNotFound, "no_batch", "code", code)
	}
	return l.batchOf(ctx, l.pool, found[0])
}

// PiecesOf reads an intake list: one number a line, or a table with a header serial[,place]. Its
// refusals name line and column.
func PiecesOf(list string) ([]Piece, []*sheet.Refusal, error) {
	in, refused, err := sheet.ReadIntake(strings.NewReader(list))
	if err != nil {
		return nil, refused, err
	}
	pieces := make([]Piece, 0, len(in))
	for _, r := range in {
		place := 0
		if r.Place != "" {
			n, err := strconv.Atoi(r.Place)
			if err != nil || n < 1 {
				refused = append(refused, &sheet.Refusal{Line: r.Line, Column: "place", Code: "place_number", Args: []string{r.Place}})
				continue
			}
			place = n
		}
		pieces = append(pieces, Piece{Serial: r.Serial, Place: place, Line: r.Line})
	}
	slices.SortFunc(refused, func(x, y *sheet.Refusal) int { return x.Line - y.Line })
	return pieces, refused, nil
}
