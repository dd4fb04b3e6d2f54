package paper

import (
	"net/http"
	"slices"
	"strconv"
	"strings"
	"time"

	"ratehouse/store"
	"ratehouse/store/proof"
	"ratehouse/web/page"
	"ratehouse/web/part"
	"ratehouse/web/words"
)

// mostNamed movements are listed by number where a reason holds many.
const mostNamed = 60

// releaseView is a batch before a release, or after one.
type releaseView struct {
	list   store.ReleaseList
	form   *page.Form
	ready  []readyRow
	held   []heldRow
	choice string
	fresh  []paperRow // released just now
	asked  int        // how many were asked for; -1 when nobody just did
	counts struct{ certificates, reports, chosen, held, released int }
}

// readyRow is one movement that can be released.
type readyRow struct {
	store.Releasable
	batch   string
	Title   string // of the paper it would get
	Judged  part.Judged
	Because string // symbols outside their limits, cause of an end, the paper it replaces
	Chosen  bool
}

// heldRow is a reason with the movements it holds.
type heldRow struct {
	Reason  string
	Serials []string
	More    int
}

// Release shows what of a batch can be released, and what is held and why.
func (p *Paper) Release(w http.ResponseWriter, r *http.Request) error {
	c := page.Of(r)
	v := releaseView{form: page.NewForm(c), choice: r.URL.Query().Get("select"), asked: -1}
	if n, err := strconv.Atoi(r.URL.Query().Get("asked")); err == nil {
		v.asked = n
	}
	return p.showRelease(w, r, v, nil)
}

// PostRelease releases the chosen movements and shows what became of it on a page of its own, so that
// loading it again asks for nothing twice.
func (p *Paper) PostRelease(w http.ResponseWriter, r *http.Request) error {
	f, err := page.ReadForm(r)
	if err != nil {
		return err
	}
	c, code, serials := page.Of(r), param(r, "code"), f.All("serial")
	if len(serials) == 0 {
		f.Wrong("", words.ReleaseChoose)
		return p.showRelease(w, r, releaseView{form: f, choice: "none", asked: -1}, serials)
	}
	since := p.lab.Now().Truncate(time.Millisecond) // instants are kept to the microsecond
	if _, err := p.lab.Release(r.Context(), c.Actor, code, serials); err != nil {
		return err
	}
	return page.Redirect(w, r, page.Query(releaseURL(code), "since", since.UTC().Format(time.RFC3339Nano), "asked", strconv.Itoa(len(serials))))
}

func (p *Paper) showRelease(w http.ResponseWriter, r *http.Request, v releaseView, chosen []string) error {
	c, code := page.Of(r), param(r, "code")
	var err error
	if v.list, err = p.lab.Releasable(r.Context(), c.Actor, code); err != nil {
		return err
	}
	v.sort(c, chosen)
	if since, err := time.Parse(time.RFC3339Nano, r.URL.Query().Get("since")); err == nil && v.asked >= 0 {
		papers, err := p.lab.Papers(r.Context(), c.Actor, code)
		if err != nil {
			return err
		}
		v.fresh = rowsOf(c, slices.DeleteFunc(papers, func(one store.Paper) bool { return one.At.Before(since) }))
	}
	return page.Render(w, r, v.form.Status(), releasePage(c, v))
}

// sort parts the movements into what is ready, held and done.
func (v *releaseView) sort(c *page.Context, chosen []string) {
	held := map[string][]string{}
	for _, m := range v.list.Movements {
		switch {
		case m.Why == "released_already":
			v.counts.released++
		case m.Why != "":
			held[m.Why] = append(held[m.Why], m.Serial)
			v.counts.held++
		default:
			v.ready = append(v.ready, v.row(c, m, chosen))
		}
	}
	for _, code := range store.HoldCodes {
		if list := held[code]; len(list) > 0 {
			row := heldRow{Reason: c.Hold(code), Serials: list[:min(len(list), mostNamed)]}
			row.More = len(list) - len(row.Serials)
			v.held = append(v.held, row)
		}
	}
}

func (v *releaseView) row(c *page.Context, m store.Releasable, chosen []string) readyRow {
	rejection := m.Kind == string(proof.KindRejection)
	row := readyRow{Releasable: m, batch: v.list.Batch.Code, Title: c.Say(words.PaperTitle("", rejection)), Judged: part.JudgedOf(m.Verdict, false, m.End)}
	switch v.choice {
	case "none":
		row.Chosen = slices.Contains(chosen, m.Serial)
	case "certificates":
		row.Chosen = !rejection
	case "reports":
		row.Chosen = rejection
	default:
		row.Chosen = true
	}
	if rejection {
		v.counts.reports++
	} else {
		v.counts.certificates++
	}
	if row.Chosen {
		v.counts.chosen++
	}
	var why []string
	if len(m.Failed) > 0 {
		why = append(why, strings.Join(m.Failed, ", "))
	}
	if m.Cause != "" {
		why = append(why, m.Cause)
	}
	if m.Replaces != "" {
		why = append(why, c.Say(words.ReleaseReplaces.With(m.Replaces)))
	}
	row.Because = strings.Join(why, "; ")
	return row
}

func (v releaseView) frame(c *page.Context) page.Sheet {
	b := v.list.Batch
	s := page.Sheet{Title: c.Say(words.ReleaseOf), Code: b.Code, Sub: described(c, b), Nav: page.BatchesURL, Styles: styles, Scripts: []string{"release.js"},
		Back: &page.Link{Text: c.Say(words.BatchTitle.With(b.Code)), URL: page.BatchURL(b.Code)},
		Cells: []page.Cell{page.TextCell(c.Say(words.ReleaseReadyC), c.Count(v.counts.certificates)), page.TextCell(c.Say(words.ReleaseReadyR), c.Count(v.counts.reports)),
			page.TextCell(c.Say(words.ReleaseHeld), c.Count(v.counts.held)), page.TextCell(c.Say(words.ReleasedAlready), c.Count(v.counts.released))}}
	if v.counts.released > 0 {
		s.Acts = append(s.Acts, page.Act{Text: c.Say(words.NavCertificates), URL: papersURL(b.Code)})
	}
	if !v.list.CanSign {
		s.Notices = append(s.Notices, page.Notice{Tone: page.Bad, Title: c.Say(words.ReleaseNoKey), Text: c.Say(words.ReleaseNoKeyHow)})
	}
	if n, ok := v.result(c); ok {
		s.Notices = append(s.Notices, n)
	}
	return s
}

// result tells what a release just did, as the papers that are there now say it.
func (v releaseView) result(c *page.Context) (page.Notice, bool) {
	if v.asked < 0 {
		return page.Notice{}, false
	}
	done := len(v.fresh)
	if done == 0 {
		return page.Notice{Tone: page.Attn, Title: c.Say(words.ReleaseNone), Text: c.Say(words.ReleaseNoneWhy)}, true
	}
	reports := 0
	for _, one := range v.fresh {
		if one.Kind == string(proof.KindRejection) {
			reports++
		}
	}
	n := page.Notice{Tone: page.Good, Title: c.Say(words.ReleaseDone.With(done)),
		Text: c.Say(words.ReleaseDoneWhy.With(words.CountCerts.With(done-reports), words.CountReports.With(reports))),
		Act:  &page.Link{Text: c.Say(words.PapersPrint), URL: printURL(v.list.Batch.Code, 0)}}
	if rest := v.asked - done; rest > 0 {
		n.Tone, n.Text = page.Attn, n.Text+" "+c.Say(words.ReleaseNotAll.With(rest))
	}
	return n, true
}

// cautions are what the releaser should know before the button: some always, some by the programme.
func (v releaseView) cautions(c *page.Context) []string {
	list := []words.Text{words.ReleaseFrozen, words.CautionTitle, words.CautionAccreditation}
	if v.list.Batch.Programme.TextChecked == nil {
		list = append(list, words.ReleaseNoText)
	}
	list = append(list, words.ReleaseNoU)
	out := make([]string, len(list))
	for i, t := range list {
		out[i] = c.Say(t)
	}
	return out
}

// choices are the ways to choose many at once; without a script they are links.
func (v releaseView) choices(c *page.Context) []page.Link {
	code := v.list.Batch.Code
	list := []page.Link{{Text: c.Say(words.All), URL: releaseURL(code)}}
	if v.counts.certificates > 0 && v.counts.reports > 0 {
		list = append(list, page.Link{Text: c.Say(words.ReleaseCerts), URL: page.Query(releaseURL(code), "select", "certificates")},
			page.Link{Text: c.Say(words.ReleaseReps), URL: page.Query(releaseURL(code), "select", "reports")})
	}
	return append(list, page.Link{Text: c.Say(words.None), URL: page.Query(releaseURL(code), "select", "none")})
}
