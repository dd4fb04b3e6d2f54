// Package web is the one HTTP server: the route table with its rights, middleware, health,
// metrics.
package web
