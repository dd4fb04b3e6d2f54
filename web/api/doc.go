// Package api is the JSON API v1 for stations, scripts and other programs: bearer tokens with
// scopes, problems after RFC 9457, and an OpenAPI document made from the same Go types that the
// handlers use.
package api
