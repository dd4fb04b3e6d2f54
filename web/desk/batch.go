package desk

import (
	"net/http"
	"slices"
	"strconv"
	"time"

	"ratehouse/store"
	"ratehouse/trial"
	"ratehouse/trial/lot"
	"ratehouse/web/chart"
	"ratehouse/web/page"
	"ratehouse/web/part"
	"ratehouse/web/words"
)

// Batch is the page of one batch: for who sees verdicts with all of them, for who is reading with
// progress, places and remarks alone.
func (d *Desk) Batch(w http.ResponseWriter, r *http.Request) error {
	return d.showBatch(w, r, nil)
}

// showBatch draws the page; form is a remark that was not acceptable, and goes back filled in.
func (d *Desk) showBatch(w http.ResponseWriter, r *http.Request, form *page.Form) error {
	c := page.Of(r)
	sheet, err := d.lab.BatchSheet(r.Context(), c.Actor, param(r, "code"))
	if err != nil {
		return err
	}
	b, err := judgeBatch(sheet)
	if err != nil {
		return err
	}
	types, err := d.lab.HolderTypes(r.Context(), c.Actor)
	if err != nil {
		return err
	}
	v := batchView{c: c, judged: b, may: rightsOf(c), choice: choiceOf(r.URL.Query()), types: types}
	v.form = v.remarkForm(form)
	status := http.StatusOK
	if form != nil {
		status = form.Status()
	}
	if !v.may.verdicts {
		v.choice = choice{Sort: v.choice.Sort, Text: v.choice.Text, Cursor: v.choice.Cursor, Remark: v.choice.Remark}
		v.table = v.tableView()
		return page.Render(w, r, status, plainBatchPage(c, v))
	}
	v.table = v.tableView()
	return page.Render(w, r, status, batchPage(c, v))
}

// batchView is the page of a batch ready to be drawn.
type batchView struct {
	c *page.Context
	*judged
	may    rights
	choice choice
	types  []store.HolderType
	table  tableView
	form   *page.Form // of a remark; nil when none is open
}

func (v batchView) sheet() page.Sheet {
	c, b := v.c, &v.Batch
	s := page.Sheet{Title: c.Say(words.BatchTitle.With(b.Code)), Sub: v.sub(), Back: &page.Link{Text: c.Say(words.BatchesAll), URL: page.BatchesURL},
		Nav: page.BatchesURL, Acts: v.acts(), Live: page.LiveURL(b.Code), Styles: []string{"desk.css"}}
	s.Cells = v.cells()
	if v.may.verdicts && (v.asksAim() || v.asksOutlook()) {
		s.Scripts = []string{page.LaterScript}
	}
	return s
}

// partFrame is the frame of a part of a batch's page when it stands on a page of its own.
func partFrame(c *page.Context, b *store.Batch) page.Sheet {
	title := c.Say(words.BatchTitle.With(b.Code))
	return page.Sheet{Title: title, Sub: forWhom(c, b), Nav: page.BatchesURL, Styles: []string{"desk.css"},
		Back: &page.Link{Text: title, URL: page.BatchURL(b.Code)}}
}

// sub says in one line what the batch is.
func (v batchView) sub() string {
	size := words.Movements.With(v.Batch.Size)
	if !v.may.verdicts {
		return v.c.Say(words.SizeAndCalibre.With(size, words.Raw(forWhom(v.c, &v.Batch))))
	}
	return v.c.Say(words.BatchSub.With(size, words.Raw(forWhom(v.c, &v.Batch)), v.Batch.Category))
}

func (v batchView) acts() (acts []page.Act) {
	c, code := v.c, v.Batch.Code
	ready, reports := v.ready()
	if v.may.verdicts {
		acts = append(acts, page.Act{Text: c.Say(words.ValuesAsCSV), URL: page.Under(page.BatchURL(code), "sheets.csv")})
	}
	if n := v.papers(); v.may.papers && n > 0 {
		acts = append(acts, page.Act{Text: c.Say(words.CountPapers.With(n)), URL: page.Under(page.BatchURL(code), "certificates")})
	}
	if v.may.enter && v.due >= 0 {
		acts = append(acts, page.Act{Text: c.Say(words.RoundNumber.With(v.due)), URL: page.RoundURL(code, v.due), Main: !v.may.release || ready+reports == 0})
	}
	if v.may.release {
		release := page.Act{URL: page.Under(page.BatchURL(code), "release"), Main: ready+reports > 0}
		switch {
		case ready > 0:
			release.Text = c.Say(words.ReleaseCertificates.With(ready))
		case reports > 0:
			release.Text = c.Say(words.ReleaseReports.With(reports))
		default:
			release.Text = c.Say(words.ReleaseAct)
			release.Disabled = c.Say(words.ReleaseNothing)
		}
		acts = append(acts, release)
	}
	return acts
}

// papers counts the movements that have a certificate or a report.
func (v batchView) papers() (n int) {
	for i := range v.pieces {
		if v.pieces[i].Paper != "" {
			n++
		}
	}
	return n
}

// ready counts what has a verdict and no paper yet; what holds a release is looked at on its page.
func (v batchView) ready() (certificates, reports int) {
	if v.due >= 0 {
		return 0, 0
	}
	for i := range v.pieces {
		switch p := &v.pieces[i]; {
		case p.Paper != "":
		case p.standing() == standsPass:
			certificates++
		case p.standing() == standsFail, p.End == store.Rejected, p.End == store.Removed:
			reports++
		}
	}
	return certificates, reports
}

func (v batchView) cells() []page.Cell {
	c, b := v.c, &v.Batch
	cells := []page.Cell{page.TextCell(c.Say(words.TrialDayHead), v.dayText())}
	if v.due >= 0 {
		cells = append(cells, page.TextCell(c.Say(words.NextReading), c.Say(words.WithinTolerance.With(c.Weekday(b.Due(v.due)), c.Time(b.Due(v.due)),
			c.Span(tolerance(b))))))
	}
	cells = append(cells, page.TextCell(c.Say(words.Programme), c.Say(words.ProgrammeVersion.With(b.Programme.Title, b.Programme.Version))),
		page.TextCell(c.Say(words.TrialFromTo), c.Say(words.DateToDate.With(c.Date(b.StartsAt), c.Date(b.Due(b.LastStep()))))),
		page.TextCell(c.Say(words.Where), v.where()))
	if v.may.verdicts {
		cells = append(cells, page.TextCell(c.Say(words.DecisionRule), c.Say(decision(b.Programme))))
	}
	if v.may.verdicts && b.DeliveryNote != "" {
		cells = append(cells, page.TextCell(c.Say(words.DeliveryNote), b.DeliveryNote))
	}
	if v.may.verdicts && b.OrderNumber != "" {
		cells = append(cells, page.TextCell(c.Say(words.OrderNumber), b.OrderNumber))
	}
	if b.Condition != "" {
		cells = append(cells, page.TextCell(c.Say(words.ConditionLabel), b.Condition))
	}
	return cells
}

func tolerance(b *store.Batch) time.Duration {
	return time.Duration(b.Programme.Reading.ToleranceS) * time.Second
}

// dayText says which day the trial is at and how far its reading is.
func (v batchView) dayText() string {
	c, days := v.c, len(v.Batch.Programme.Days)
	switch store.StateOf(v.Rounds) {
	case store.BatchDone:
		return c.Say(words.TrialFinished)
	case store.BatchWaiting:
		return c.Say(words.TrialWaiting)
	}
	day := words.DayOf.With(max(closedDays(&v.Batch, v.due), 0), days)
	r := v.Rounds[v.due]
	if r.Read == 0 && r.State == store.RoundWaiting {
		return c.Say(day)
	}
	return c.Say(words.DayAndReading.With(day, v.due, words.ReadOf.With(r.Read, r.Going)))
}

// where lists the holders, a long list by its ends.
func (v batchView) where() string {
	var codes []string
	for i := range v.Movements {
		if h := v.Movements[i].Holder; h != "" && !slices.Contains(codes, h) {
			codes = append(codes, h)
		}
	}
	slices.Sort(codes)
	switch n := len(codes); {
	case n == 0:
		return v.c.Say(words.NoHolder)
	case n == 1:
		return codes[0]
	default:
		return v.c.Say(words.HoldersFromTo.With(n, codes[0], codes[n-1]))
	}
}

func decision(p *trial.Programme) words.Text {
	if p.Decision.Rule == trial.Guarded {
		return words.DecisionGuarded
	}
	return words.DecisionSimple
}

// strip is the programme with how many were read on each day.
func (v batchView) strip() part.Strip {
	days := len(v.Batch.Programme.Days)
	read := make([]int, days+1)
	for d := 1; d <= days; d++ {
		if k := roundOfDay(&v.Batch, d); k >= 0 {
			read[d] = v.Rounds[k].Read
		}
	}
	return part.StripOf(v.c.Printer, v.Batch.Programme, closedDays(&v.Batch, v.due), read)
}

// roundLink is one reading round to go to.
type roundLink struct {
	K, URL, Says string
	Now          bool
}

// rounds lists the reading rounds for who may enter them.
func (v batchView) rounds() (links []roundLink) {
	if !v.may.enter {
		return nil
	}
	for k := range v.Rounds {
		r := &v.Rounds[k]
		links = append(links, roundLink{strconv.Itoa(k), page.RoundURL(v.Batch.Code, k),
			v.c.Say(words.RoundSays.With(k, words.ReadOf.With(r.Read, r.Going))), k == v.due})
	}
	return links
}

// asksRisk tells whether some movement can still change its fate.
func (v batchView) asksRisk() bool { return v.due >= 0 || v.cannot > 0 }

// hasLeft tells whether anything stands beside the remarks: a large finished batch has neither
// movements at risk nor holders drawn.
func (v batchView) hasLeft() bool {
	return v.asksRisk() || len(v.pieces) <= mostOnMap && slices.ContainsFunc(v.pieces, func(p piece) bool { return p.Holder != "" })
}

// yieldView is what is known of the batch as a whole.
type yieldView struct {
	Share, Of string // "" while nothing is judged
	Notes     []string
	Lines     []part.Tally
}

func (v batchView) yield() yieldView {
	c, all := v.c, v.all()
	var y yieldView
	if n := v.first.Judged(); n > 0 {
		y.Share, y.Of = c.Share(v.first.Pass, n), c.Say(words.OfJudged.With(v.first.Pass, n))
	}
	switch from := decidedFrom(v.Batch.Programme, v.Batch.Category); {
	case all.None > 0:
		y.Notes = append(y.Notes, c.Say(words.YieldNoLimits))
	case all.Judged() == 0 && v.next > 0 && v.next <= from:
		y.Notes = append(y.Notes, c.Say(words.NoVerdictBefore.With(from)))
	case all.Judged() == 0:
		y.Notes = append(y.Notes, c.Say(words.NothingJudged))
	}
	if n := v.again.Judged(); n > 0 {
		y.Notes = append(y.Notes, c.Say(words.YieldAgain.With(v.again.Pass, n)))
	}
	counts := map[string]int{standsPass: all.Pass, standsFail: all.Fail, standsCannot: v.cannot, standsOpen: all.Open - v.cannot, standsNone: all.None,
		string(store.Rejected): all.Rejected, string(store.Removed): all.Removed, string(store.Withdrawn): all.Withdrawn, string(store.Void): all.VoidEnds}
	always := []string{standsPass, standsFail, standsCannot, standsOpen}
	for _, s := range []string{standsPass, standsFail, string(store.Rejected), string(store.Removed), standsCannot, standsOpen, standsNone,
		string(store.Withdrawn), string(store.Void)} {
		if n := counts[s]; n > 0 || slices.Contains(always, s) && all.None == 0 {
			y.Lines = append(y.Lines, part.Tally{Judged: judgedAs(s), N: n, Of: v.Batch.Size, URL: v.filter(s)})
		}
	}
	return y
}

// filter is the table with one standing alone.
func (v batchView) filter(standing string) string {
	q := choice{Sort: v.choice.Sort, Dist: v.choice.Dist, Verdict: standing}
	return q.address(v.Batch.Code, "table")
}

// pareto counts failures by criterion, with bars of their own for what no criterion decided.
func (v batchView) pareto() chart.Pareto {
	results, rejected, removed := v.failing()
	var extra []chart.ParetoRow
	if rejected > 0 {
		extra = append(extra, chart.ParetoRow{Title: v.c.Say(words.ParetoRejected), Alone: rejected})
	}
	if removed > 0 {
		extra = append(extra, chart.ParetoRow{Title: v.c.Say(words.ParetoRemoved), Alone: removed})
	}
	all := v.all()
	return chart.ParetoOf(v.c.Printer, v.judge, results, all.Judged(), extra...)
}

// distribution is the criterion drawn, by the address or else the first.
type distribution struct {
	Chart   chart.Distribution
	Title   string
	Note    string
	Choices []symbolLink
}

type symbolLink struct {
	Symbol, URL, Says string
	Here              bool
}

func (v batchView) distribution() distribution {
	c, crit := v.c, v.Batch.Programme.Criteria
	at := max(slices.IndexFunc(crit, func(k trial.Criterion) bool { return k.Symbol == v.choice.Dist }), 0)
	results := v.measured()
	d := distribution{Chart: chart.DistributionOf(c.Printer, v.judge, at, results), Title: c.Say(words.DistributionOf.With(crit[at].Symbol))}
	d.Note = c.Say(words.MeasuredOn.With(len(d.Chart.Samples), v.Batch.Size))
	if len(d.Chart.Samples) == 0 && crit[at].Formula.Kind == trial.Mean {
		v.soFar(&d, at)
	}
	for i, k := range crit {
		q := choice{Sort: v.choice.Sort, Verdict: v.choice.Verdict, Failed: v.choice.Failed, Text: v.choice.Text, Dist: k.Symbol}
		d.Choices = append(d.Choices, symbolLink{k.Symbol, q.address(v.Batch.Code, "h-dist"), c.Say(words.CriterionTitle(k.Symbol, k.Title)), i == at})
	}
	return d
}

// soFar draws the mean of the days read so far in the place of a mean that is not known yet, and says
// so: it decides nothing.
func (v batchView) soFar(d *distribution, at int) {
	l, most := v.judge.Limit(at), 0
	var sum trial.Exact
	for i := range v.pieces {
		p := &v.pieces[i]
		if p.End != store.InTrial || p.days == 0 {
			continue
		}
		most = max(most, p.days)
		d.Chart.Samples = append(d.Chart.Samples, lot.Sample{X: p.mean.Float(), Outside: !l.Contains(p.mean)})
		sum = sum.Add(p.mean)
	}
	n := len(d.Chart.Samples)
	if n == 0 {
		return
	}
	mean := sum.Times(trial.Ratio(1, int64(n)))
	d.Chart.Mean, d.Chart.MeanText = mean.Float(), v.c.Signed(mean.Decimal(2), 2)
	d.Title, d.Note = v.c.Say(words.MeanSoFar), v.c.Say(words.MeanSoFarOf.With(words.Days.With(most), words.Movements.With(n)))
}
