// Package assets holds what is built into the programs.
package assets

import "embed"

// Words are the message files, named area.language.toml.
//
//go:embed words/*.toml
var Words embed.FS
