package api

import (
	"encoding/json"
	"log/slog"
	"maps"
	"net/http"
	"reflect"
	"slices"
	"strings"

	"github.com/danielgtaylor/huma/v2"
	"github.com/danielgtaylor/huma/v2/adapters/humachi"

	"ratehouse/store"
)

// Prefix is where the API begins. It changes only when a client written for it would break.
const Prefix = "/api/v1"

// DocumentPath is where the OpenAPI document is served, to everybody.
const DocumentPath = Prefix + "/openapi.json"

// Config is what the API hangs on.
type Config struct {
	Lab    *store.Lab
	Logger *slog.Logger
}

// mostBytes is how long the body of a call may be.
const mostBytes = 1 << 20

// API holds the routes and the document that describes them.
type API struct {
	lab      *store.Lab
	log      *slog.Logger
	huma     huma.API
	routes   []Route
	document []byte
}

// Route is one line of the server's route table. The API checks the right itself, because its
// refusals are problems and not pages; the table names it to be walked by tests.
type Route struct {
	Method, Pattern string
	Public          bool
	Right           store.Right
	Handle          http.Handler
}

// New builds the API.
func New(c Config) *API {
	a := &API{lab: c.Lab, log: c.Logger}
	config := huma.DefaultConfig("Ratehouse", "1.0.0")
	config.Info.Description = "Readings in, verdicts and certificates out. Numbers are decimal strings, exact to 0.001; instants are RFC 3339. " +
		"Every answer that is not a success is a problem (RFC 9457) with a code from a closed list."
	config.Servers = []*huma.Server{{URL: "/"}}
	config.DocsPath, config.OpenAPIPath, config.SchemasPath = "", "", "" // its page loads scripts from elsewhere; we serve the document ourselves
	config.CreateHooks = nil                                             // no $schema member in our answers
	config.RejectUnknownQueryParameters = true
	config.Components.SecuritySchemes = map[string]*huma.SecurityScheme{"bearer": {Type: "http", Scheme: "bearer",
		Description: "A token made by the laboratory manager (ratehouse token add). Its scopes say what it may do."}}
	a.huma = huma.NewAPI(config, (*adapter)(a))
	a.batchRoutes()
	a.readingRoutes()
	a.movementRoutes()
	a.certificateRoutes()
	a.climateRoutes()
	a.publish()
	return a
}

// Routes are the lines for the server's route table.
func (a *API) Routes() []Route { return slices.Clone(a.routes) }

// publish freezes the document: nothing is registered after it.
func (a *API) publish() {
	text, err := json.MarshalIndent(a.huma.OpenAPI(), "", "  ")
	if err != nil {
		panic(err) // made of our own types alone
	}
	a.document = append(text, '\n')
	a.routes = append(a.routes, Route{Method: http.MethodGet, Pattern: DocumentPath, Public: true, Handle: http.HandlerFunc(a.serveDocument)})
}

func (a *API) serveDocument(w http.ResponseWriter, _ *http.Request) {
	w.Header().Set("Content-Type", "application/json")
	w.Header().Set("Cache-Control", "no-cache")
	w.Write(a.document)
}

// adapter collects what is registered as lines of the server's one route table.
type adapter API

// Handle is called by huma for every operation.
func (a *adapter) Handle(op *huma.Operation, handler func(huma.Context)) {
	right, _ := op.Metadata["right"].(store.Right)
	h := http.Handler(http.HandlerFunc(func(w http.ResponseWriter, r *http.Request) { handler(humachi.NewContext(op, r, w)) }))
	if op.Method == http.MethodPost {
		h = (*API)(a).bounded(h)
	}
	h = (*API)(a).recovered((*API)(a).guarded(right, h))
	a.routes = append(a.routes, Route{Method: op.Method, Pattern: op.Path, Right: right, Handle: h})
}

// ServeHTTP is not used: the server's router routes.
func (a *adapter) ServeHTTP(w http.ResponseWriter, r *http.Request) { http.NotFound(w, r) }

// scopeOf names the scope that gives a right, for the document.
var scopeOf = map[store.Right]store.Scope{
	store.RightBatches: store.ScopeRead, store.RightVerdicts: store.ScopeRead, store.RightCertificates: store.ScopeRead,
	store.RightEnter: store.ScopeReadings, store.RightRegister: store.ScopeBatches, store.RightClimate: store.ScopeClimate,
}

// operation fills in what all operations have in common.
func operation(method, path, id, summary string, right store.Right, errors ...int) huma.Operation {
	errors = append(errors, http.StatusUnauthorized, http.StatusForbidden, http.StatusInternalServerError)
	if method == http.MethodPost {
		errors = append(errors, http.StatusBadRequest, http.StatusRequestEntityTooLarge, http.StatusUnsupportedMediaType, http.StatusUnprocessableEntity)
	}
	slices.Sort(errors)
	return huma.Operation{Method: method, Path: Prefix + path, OperationID: id, Summary: summary, Errors: slices.Compact(errors),
		SkipValidateBody: true, // read by our own strict reader
		Security:         []map[string][]string{{"bearer": {string(scopeOf[right])}}}, Metadata: map[string]any{"right": right}}
}

// bodyOf makes T the documented body of an operation already registered. Bodies are read strictly by
// our own reader, which knows twice given keys and names every unknown one.
func bodyOf[T any](a *API, path string) {
	op := a.huma.OpenAPI().Paths[Prefix+path].Post
	schema := a.huma.OpenAPI().Components.Schemas.Schema(reflect.TypeFor[T](), true, "")
	op.RequestBody.Content["application/json"] = &huma.MediaType{Schema: schema}
}

// closed registers a closed list of codes as a schema of its own and refers to it.
func closed(r huma.Registry, name, doc string, codes []string) *huma.Schema {
	list := make([]any, len(codes))
	for i, c := range codes {
		list[i] = c
	}
	r.Map()[name] = &huma.Schema{Type: huma.TypeString, Enum: list, Description: doc}
	return &huma.Schema{Ref: "#/components/schemas/" + name}
}

// sorted is the closed list made of several.
func sorted(lists ...[]string) []string {
	set := map[string]bool{}
	for _, l := range lists {
		for _, c := range l {
			set[c] = true
		}
	}
	return slices.Sorted(maps.Keys(set))
}

// NotFound answers an address below /api/ at which there is nothing.
func (a *API) NotFound(w http.ResponseWriter, r *http.Request) {
	a.show(w, r, problem(http.StatusNotFound, "no_such_address", "path", r.URL.Path))
}

// MethodNotAllowed answers an address that knows other methods.
func (a *API) MethodNotAllowed(w http.ResponseWriter, r *http.Request) {
	var allowed []string
	for _, one := range a.routes {
		if matches(one.Pattern, r.URL.EscapedPath()) {
			allowed = append(allowed, one.Method)
		}
	}
	w.Header().Set("Allow", strings.Join(allowed, ", "))
	a.show(w, r, problem(http.StatusMethodNotAllowed, "method_not_allowed", "method", r.Method, "allowed", strings.Join(allowed, ", ")))
}

// matches compares segment by segment; {name} stands for any one.
func matches(pattern, path string) bool {
	p, q := strings.Split(pattern, "/"), strings.Split(path, "/")
	return slices.EqualFunc(p, q, func(a, b string) bool { return a == b || strings.HasPrefix(a, "{") && b != "" })
}
