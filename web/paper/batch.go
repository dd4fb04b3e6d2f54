package paper

import (
	"net/http"
	"strconv"

	"ratehouse/store"
	"ratehouse/store/proof"
	"ratehouse/web/page"
	"ratehouse/web/part"
	"ratehouse/web/words"
)

// mostPrinted papers stand on one page for printing: about 6 MB of page.
const mostPrinted = 100

// papersURL lists the papers of a batch, printURL shows them one after another.
func papersURL(code string) string  { return page.Under(page.BatchURL(code), "certificates") }
func releaseURL(code string) string { return page.Under(page.BatchURL(code), "release") }

func printURL(code string, after int) string {
	from := ""
	if after > 0 {
		from = strconv.Itoa(after)
	}
	return page.Query(page.Under(papersURL(code), "print"), "after", from)
}

// papersView lists the papers of a batch.
type papersView struct {
	batch  store.Batch
	papers []paperRow
	valid  int
	may    bool // release
}

// paperRow is one released paper in a list.
type paperRow struct {
	store.Paper
	Judged part.Judged
	Title  string
	When   string
	Now    string
	New    bool
}

// Papers lists the papers of a batch.
func (p *Paper) Papers(w http.ResponseWriter, r *http.Request) error {
	c, code := page.Of(r), param(r, "code")
	batch, err := p.lab.Batch(r.Context(), c.Actor, code)
	if err != nil {
		return err
	}
	papers, err := p.lab.Papers(r.Context(), c.Actor, code)
	if err != nil {
		return err
	}
	v := papersView{batch: batch, papers: rowsOf(c, papers), may: c.Actor.May(store.RightRelease)}
	for _, one := range papers {
		if one.Valid() {
			v.valid++
		}
	}
	return page.Render(w, r, http.StatusOK, papersPage(c, v))
}

func rowsOf(c *page.Context, papers []store.Paper) []paperRow {
	out := make([]paperRow, len(papers))
	for i, one := range papers {
		rejection := one.Kind == string(proof.KindRejection)
		row := paperRow{Paper: one, Title: c.Say(words.PaperTitle("", rejection)), When: c.Instant(one.At), Now: c.Say(words.PapersValid),
			Judged: part.Judged{Mark: part.Pass, Word: words.VerdictPass}}
		if rejection {
			row.Judged = part.Judged{Mark: part.Fail, Word: words.VerdictFail}
		}
		switch {
		case one.ReplacedBy != "":
			row.Now = c.Say(words.PapersReplace.With(one.ReplacedBy))
		case !one.RevokedAt.IsZero():
			row.Now = c.Say(words.PapersRevoked.With(c.Date(one.RevokedAt), one.Revoked))
		}
		out[i] = row
	}
	return out
}

// printView is a part of a batch's valid papers, ready for the printer.
type printView struct {
	code   string
	sheets []sheet
	from   int // number of the first movement
	next   int // movement after which the next part begins; 0: there is none
}

// Print shows the valid papers of a batch one after another.
func (p *Paper) Print(w http.ResponseWriter, r *http.Request) error {
	c, code := page.Of(r), param(r, "code")
	after, err := strconv.Atoi(r.URL.Query().Get("after"))
	if err != nil {
		after = 0
	}
	batch, err := p.lab.Batch(r.Context(), c.Actor, code)
	if err != nil {
		return err
	}
	list, err := p.lab.Certificates(r.Context(), c.Actor, batch.Code, after, mostPrinted+1)
	if err != nil {
		return err
	}
	v := printView{code: batch.Code, from: after + 1}
	if len(list) > mostPrinted {
		list = list[:mostPrinted]
		v.next = list[mostPrinted-1].No
	}
	for _, cert := range list {
		v.sheets = append(v.sheets, open(cert, r.URL.Query().Get("lang"), "2"))
	}
	return page.Render(w, r, http.StatusOK, printPage(c, v))
}

func (v papersView) frame(c *page.Context) page.Sheet {
	s := page.Sheet{Title: c.Say(words.PapersTitle), Code: v.batch.Code, Nav: page.BatchesURL, Styles: styles,
		Sub: described(c, v.batch), Back: &page.Link{Text: c.Say(words.BatchTitle.With(v.batch.Code)), URL: page.BatchURL(v.batch.Code)}}
	if v.may {
		s.Acts = append(s.Acts, page.Act{Text: c.Say(words.ReleaseTitle), URL: releaseURL(v.batch.Code)})
	}
	if v.valid > 0 {
		s.Acts = append(s.Acts, page.Act{Text: c.Say(words.PapersPrint), URL: printURL(v.batch.Code, 0), Main: true})
	}
	return s
}

// described is a batch in a line.
func described(c *page.Context, b store.Batch) string {
	depositor := b.Depositor.Title
	if depositor == "" {
		depositor = b.Depositor.Code
	}
	return c.Say(words.ReleaseWhat.With(b.Programme.Title, b.Category, depositor))
}

func (v papersView) empty(c *page.Context) part.Empty {
	e := part.Empty{Title: c.Say(words.PapersEmpty), Text: c.Say(words.PapersFill)}
	if v.may {
		e.Act, e.ActText = releaseURL(v.batch.Code), c.Say(words.ReleaseTitle)
	}
	return e
}

func (v printView) heading(c *page.Context) string {
	what := c.Say(words.CountPapers.With(len(v.sheets)))
	if v.from > 1 {
		what = c.Say(words.PapersRange.With(what, strconv.Itoa(v.from)))
	}
	return c.Say(words.PapersPart.With(words.PapersTitle, v.code, what))
}
