package web

import (
	"net/http"
	"strings"
	"time"

	"ratehouse/store"
	"ratehouse/web/page"
	"ratehouse/web/words"
)

// The session cookie dies with the browser; the laboratory ends sessions by its own clock. Over https
// the name binds it to this host.
const (
	plainCookie  = "session"
	secureCookie = "__Host-session"
	langCookie   = "language"
	themeCookie  = "theme"
	oneYear      = 365 * 24 * time.Hour
)

func (s *server) cookieName() string {
	if s.secure {
		return secureCookie
	}
	return plainCookie
}

func (s *server) token(r *http.Request) string {
	c, err := r.Cookie(s.cookieName())
	if err != nil || len(c.Value) > 128 {
		return ""
	}
	return c.Value
}

func (s *server) remember(w http.ResponseWriter, token string) {
	http.SetCookie(w, &http.Cookie{Name: s.cookieName(), Value: token, Path: "/", HttpOnly: true, Secure: s.secure, SameSite: http.SameSiteLaxMode})
}

func (s *server) forget(w http.ResponseWriter) {
	http.SetCookie(w, &http.Cookie{Name: s.cookieName(), Path: "/", MaxAge: -1, HttpOnly: true, Secure: s.secure, SameSite: http.SameSiteLaxMode})
}

// prefer keeps a choice of looks or language in the browser; it says nothing about the person.
func (s *server) prefer(w http.ResponseWriter, name, value string) {
	c := &http.Cookie{Name: name, Value: value, Path: "/", HttpOnly: true, Secure: s.secure, SameSite: http.SameSiteLaxMode, MaxAge: int(oneYear / time.Second)}
	if value == "" {
		c.MaxAge = -1
	}
	http.SetCookie(w, c)
}

// preferences are the language and theme kept in the browser, "" for what is none.
func preferences(r *http.Request) (lang, theme string) {
	if c, err := r.Cookie(langCookie); err == nil {
		lang = c.Value
	}
	if c, err := r.Cookie(themeCookie); err == nil && (c.Value == "light" || c.Value == "dark") {
		theme = c.Value
	}
	return lang, theme
}

// start leads to the page the actor sees first.
func (s *server) start(w http.ResponseWriter, r *http.Request) error {
	return page.Redirect(w, r, page.Of(r).Start().URL)
}

var loginLabels = []page.Label{{Name: "name", Text: words.AccountName}, {Name: "password", Text: words.Password}}

func (s *server) showLogin(w http.ResponseWriter, r *http.Request) error {
	c := page.Of(r)
	if to := s.after(c, r.URL.Query().Get("next")); c.SignedIn && to != page.LoginURL {
		return page.Redirect(w, r, to)
	}
	f := page.NewForm(c, loginLabels...)
	f.Set("next", r.URL.Query().Get("next"))
	return page.Render(w, r, http.StatusOK, loginPage(c, f))
}

func (s *server) logIn(w http.ResponseWriter, r *http.Request) error {
	f, err := page.ReadForm(r, loginLabels...)
	if err != nil {
		return err
	}
	name := strings.ToLower(f.Get("name"))
	if name == "" {
		f.Wrong("name", words.AccountMissing)
	}
	if f.Raw("password") == "" {
		f.Wrong("password", words.PasswordMissing)
	}
	c := page.Of(r)
	if !f.OK() {
		return page.Render(w, r, f.Status(), loginPage(c, f))
	}
	key := name + " " + s.clientAddr(r)
	if wait := s.tries.wait(key); wait > 0 {
		f.Wrong("", words.TooManyTries.With(c.Span(wait+time.Minute)))
		return page.Render(w, r, http.StatusTooManyRequests, loginPage(c, f))
	}
	token, a, err := s.lab.LogIn(r.Context(), name, f.Raw("password"))
	switch store.KindOf(err) {
	case store.KindUnauthenticated:
		s.tries.failed(key)
		f.Wrong("", words.WrongPassword)
		return page.Render(w, r, http.StatusUnprocessableEntity, loginPage(c, f))
	case store.KindFault:
		if err != nil {
			return err
		}
	}
	s.tries.succeeded(key)
	s.remember(w, token)
	s.admit(c, r, a)
	return page.Redirect(w, r, s.after(c, f.Raw("next")))
}

// after is where to go once signed in: where the actor wanted to go, if that is on this server.
func (s *server) after(c *page.Context, next string) string {
	if page.Local(next) && !strings.HasPrefix(next, page.LoginURL) {
		return next
	}
	return c.Start().URL
}

func (s *server) logOut(w http.ResponseWriter, r *http.Request) error {
	if token := s.token(r); token != "" {
		if err := s.lab.LogOut(r.Context(), token); err != nil {
			return err
		}
	}
	s.forget(w)
	return page.Redirect(w, r, page.LoginURL)
}

// setLanguage keeps the language with the account, and in the browser for the pages before the log-in.
func (s *server) setLanguage(w http.ResponseWriter, r *http.Request) error {
	f, err := page.ReadForm(r)
	if err != nil {
		return err
	}
	c, lang := page.Of(r), f.Get("language")
	if string(words.Choose(lang, "")) != lang {
		return &store.Error{Kind: store.KindInvalid, Code: "unknown_language", Field: "language"}
	}
	if c.SignedIn {
		if err := s.lab.SetLanguage(r.Context(), c.Actor, lang); err != nil {
			return err
		}
	}
	s.prefer(w, langCookie, lang)
	return s.back(w, r, f)
}

func (s *server) setTheme(w http.ResponseWriter, r *http.Request) error {
	f, err := page.ReadForm(r)
	if err != nil {
		return err
	}
	theme := f.Get("theme")
	if theme != "light" && theme != "dark" {
		theme = ""
	}
	s.prefer(w, themeCookie, theme)
	return s.back(w, r, f)
}

// back returns to the page a choice was made on.
func (s *server) back(w http.ResponseWriter, r *http.Request, f *page.Form) error {
	to := f.Raw("to")
	if !page.Local(to) {
		to = "/"
	}
	return page.Redirect(w, r, to)
}

func formWidth(c *page.Context) string {
	if len(c.House.DemoAccounts) > 0 {
		return "c6 stack"
	}
	return "stack"
}

// loginField is a field of the log-in; the first empty one has the focus, unless the list of faults
// takes it.
func loginField(f *page.Form, name string) page.Field {
	d := f.Field(name)
	if name == "name" && f.OK() {
		d = d.With("autofocus", true)
	}
	return d
}
