// Package testdata carries the check vectors into the program, for "ratehouse validate".
package testdata

import "embed"

// Files are the vectors; each says in itself or beside it where its numbers come from.
//
//go:embed iso3159.json kinds.json numbers.json positions.json rounding.json
//go:embed balance conformity judge lot proof/vectors.json proof/*.jws proof/published-key.public.pem
var Files embed.FS
