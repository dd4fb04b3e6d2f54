// Package api is the JSON API, version 1, and its OpenAPI document.
package api
