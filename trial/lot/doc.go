// Package lot holds the statistics of batches, rounds and readers.
package lot
