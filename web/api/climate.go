package api

import (
	"context"
	"net/http"

	"github.com/danielgtaylor/huma/v2"

	"ratehouse/store"
)

func (a *API) climateRoutes() {
	op := operation(http.MethodPost, "/chambers/{code}/climate", "post-climate", "Record the climate of a chamber (not built yet)", store.RightClimate, http.StatusNotImplemented)
	op.Description = "This version keeps no chambers: every call that is otherwise well-formed answers 501 with the code not_built, and keeps nothing."
	op.DefaultStatus = http.StatusNotImplemented
	huma.Register(a.huma, op, answering(a, a.postClimate))
	bodyOf[Climate](a, "/chambers/{code}/climate")
	delete(a.huma.OpenAPI().Paths[Prefix+"/chambers/{code}/climate"].Post.Responses, "204")
}

// Climate is the body of a call that the contract foresees.
type Climate struct {
	Samples []map[string]any `json:"samples" nullable:"false"`
}

type climateIn struct {
	Code    string `path:"code" doc:"code of the chamber"`
	RawBody []byte `contentType:"application/json"`
}

func (a *API) postClimate(context.Context, *climateIn) (*struct{}, error) {
	return nil, problem(http.StatusNotImplemented, "not_built")
}
