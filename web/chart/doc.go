// Package chart draws server-side SVG.
package chart
