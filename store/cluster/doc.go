// Package cluster runs the private PostgreSQL of a laptop, a demo or a test: a child process on
// a unix socket, without TCP and without passwords, that ends with the program and recovers from
// any death of either.
//
// A cluster lives in one directory: data/ is PostgreSQL's own, run/ holds the socket, server.log
// what the server said, ratehouse.lock marks the directory as ours and is held locked while it is
// in use. A directory that holds anything else is refused and not touched.
package cluster
