// Package static embeds styles, scripts and fonts and serves them under hashed names.
package static
