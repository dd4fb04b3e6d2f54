package page

import (
	"net/http"

	"github.com/a-h/templ"

	"ratehouse/web/static"
	"ratehouse/web/words"
)

// Sheet is the frame of one page: the title block and what stands around the content.
type Sheet struct {
	Title   string   // h1, and the name of the window
	Code    string   // a serial number or code behind the title, in its own type
	Sub     string   // one line of what
	Back    *Link    // up one level
	Acts    []Act    // at the right of the title, the main one last
	Cells   []Cell   // the ruled cells below
	Notices []Notice // above the title block
	Nav     string   // address of the word of the house bar that is underlined
	Floor   bool     // larger targets: hands with gloves
	Door    bool     // a small sheet: signing in, faults
	Bare    bool     // papers lie on the bench: no sheet, no title block; the content brings its own h1
	Live    string   // address of the stream that tells when the page is out of date; "" for pages that stay
	Scripts []string // modules by name, "round.js"
	Styles  []string // style sheets of these pages alone, by name, "desk.css"
}

// Link is a word that leads somewhere.
type Link struct{ Text, URL string }

// Act is something that can be done from the title block. One page has one Main at most.
type Act struct {
	Text, URL string
	Main      bool   // the one main act of the page
	Grave     bool   // cannot be undone
	Post      bool   // changes something: a form with one button
	Disabled  string // why it cannot be done now; "" when it can
	Fields    []Pair // hidden fields of a Post
}

// Pair is a hidden field.
type Pair struct{ Name, Value string }

// Cell is one ruled cell: a label above a value.
type Cell struct {
	Label string
	Body  templ.Component
}

// TextCell is a cell with nothing but text.
func TextCell(label, text string) Cell { return Cell{Label: label, Body: Text(text)} }

// Tone is the weight of a notice.
type Tone string

// The tones. Plain tells, Good confirms, Attn asks for a look, Bad stops.
const (
	Plain Tone = ""
	Good  Tone = "good"
	Attn  Tone = "attn"
	Bad   Tone = "bad"
)

// Notice stands where the matter is and stays there: first what is, then what to do.
type Notice struct {
	Tone  Tone
	Title string
	Text  string
	Act   *Link
}

func (n Notice) role() string {
	if n.Tone == Bad {
		return "alert"
	}
	return "status"
}

func (s Sheet) window() string {
	if s.Code == "" {
		return s.Title
	}
	return s.Title + " " + s.Code
}

func (a Act) class() string {
	switch {
	case a.Main:
		return "btn main"
	case a.Grave:
		return "btn grave"
	}
	return "btn"
}

func mainClass(s Sheet) string {
	switch {
	case s.Bare:
		return ""
	case s.Door:
		return "sheet door"
	}
	return "sheet"
}

func styles(s Sheet) []string {
	urls := []string{static.URL("tokens.css"), static.URL("base.css")}
	for _, name := range s.Styles {
		urls = append(urls, static.URL(name))
	}
	return append(urls, static.URL("print.css"))
}

func fonts() []string {
	return []string{static.URL("fonts/plex-sans-latin-400.woff2"), static.URL("fonts/plex-sans-latin-600.woff2")}
}

var themes = []struct {
	Value string
	Text  words.Text
}{{"", words.ThemeSystem}, {"light", words.ThemeLight}, {"dark", words.ThemeDark}}

func theme(c *Context) templ.Attributes {
	if c.Theme == "" {
		return nil
	}
	return templ.Attributes{"data-theme": c.Theme}
}

func (v errorView) subtitle(c *Context) string {
	if v.sub == nil {
		return ""
	}
	return c.Say(v.sub)
}

func (v errorView) signedOut() bool { return v.status == http.StatusUnauthorized }

// scripts are the modules of a page, with the one that draws it anew.
func scripts(s Sheet) []string {
	if s.Live == "" {
		return s.Scripts
	}
	return append(s.Scripts[:len(s.Scripts):len(s.Scripts)], "live.js")
}
