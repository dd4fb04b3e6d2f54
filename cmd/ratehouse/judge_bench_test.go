package main

import (
	"bytes"
	"encoding/csv"
	"errors"
	"fmt"
	"io"
	"math/rand/v2"
	"strconv"
	"testing"
	"time"
)

// manyRows writes n rows of rates with one to three decimals.
func manyRows(n int) []byte {
	rng := rand.New(rand.NewPCG(7, 7))
	var b bytes.Buffer
	b.WriteString(header + "\n")
	for i := range n {
		fmt.Fprintf(&b, "SN%07d,%d", i, 1+i%2)
		for range 15 {
			b.WriteByte(',')
			m := rng.Int64N(9000) - 3000
			b.WriteString(strconv.FormatFloat(float64(m)/1000, 'f', 1+rng.IntN(3), 64))
		}
		b.WriteByte('\n')
	}
	return b.Bytes()
}

// copyCSV reads and writes the same cells with the standard library: the limit of design.md,
// section 7.
func copyCSV(b *testing.B, data []byte) {
	r, w := csv.NewReader(bytes.NewReader(data)), csv.NewWriter(io.Discard)
	r.ReuseRecord = true
	for {
		row, err := r.Read()
		if errors.Is(err, io.EOF) {
			break
		}
		if err != nil {
			b.Fatal(err)
		}
		if err := w.Write(row); err != nil {
			b.Fatal(err)
		}
	}
	w.Flush()
}

// BenchmarkJudgeMillionRows compares judge, duplicates checked, with reading and writing the same
// cells by encoding/csv, by the shortest time of each (target: at most 1.5 times).
func BenchmarkJudgeMillionRows(b *testing.B) {
	data := manyRows(1_000_000)
	base, work := time.Hour, time.Hour
	for b.Loop() {
		start := time.Now()
		copyCSV(b, data)
		mid := time.Now()
		var fault bytes.Buffer
		if code := judge(nil, bytes.NewReader(data), io.Discard, &fault); code != exitDone {
			b.Fatal(code, fault.String())
		}
		base, work = min(base, mid.Sub(start)), min(work, time.Since(mid))
	}
	b.ReportMetric(float64(work)/float64(base), "times-encoding/csv")
}
