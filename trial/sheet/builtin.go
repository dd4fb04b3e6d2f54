package sheet

import (
	"embed"

	"ratehouse/trial"
)

//go:embed programmes programme.schema.json
var shipped embed.FS

// Schema is the JSON Schema (2020-12) of programme files. It knows their form; whether days, symbols
// and categories fit together ParseProgramme alone tells.
func Schema() []byte { return mustShipped("programme.schema.json") }

// BuiltinCodes lists the programmes that come with the program.
func BuiltinCodes() []string { return []string{"iso3159", "contest", "weekly"} }

// BuiltinFile is the file of a built-in programme, to read or to start an own one from; ok is false
// for another code.
func BuiltinFile(code string) (file []byte, ok bool) {
	for _, known := range BuiltinCodes() {
		if code == known {
			return mustShipped("programmes/" + code + ".json"), true
		}
	}
	return nil, false
}

// Builtin is a built-in programme; ok is false for another code.
func Builtin(code string) (p *trial.Programme, ok bool) {
	file, ok := BuiltinFile(code)
	if !ok {
		return nil, false
	}
	p, err := ParseProgramme(file)
	if err != nil { // a test reads them all
		panic(err)
	}
	return p, true
}

func mustShipped(name string) []byte {
	data, err := shipped.ReadFile(name)
	if err != nil {
		panic(err)
	}
	return data
}
