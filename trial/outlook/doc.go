// Package outlook forecasts open movements from a Prior.
package outlook
