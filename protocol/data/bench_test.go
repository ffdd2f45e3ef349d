package data

import (
	"bytes"
	"encoding/csv"
	"fmt"
	"io"
	"io/fs"
	"math/rand/v2"
	"testing"
	"testing/fstest"

	"steelyard/protocol/record"
)

// million is a file of 10^6 rows and three columns.
func million() []byte {
	rng := rand.New(rand.NewPCG(1, 2))
	var b bytes.Buffer
	b.WriteString("unit,line,peel\n")
	for i := range 1_000_000 {
		fmt.Fprintf(&b, "%d,%s,%.3f\n", i, [2]string{"new", "current"}[rng.IntN(2)], 12+1.3*rng.NormFloat64())
	}
	return b.Bytes()
}

// inFile hands the text out as the file lot.csv.
func inFile(text []byte) fs.FS {
	return fstest.MapFS{"lot.csv": &fstest.MapFile{Data: text}}
}

func BenchmarkLoadMillion(b *testing.B) {
	text := million()
	files := inFile(text)
	rec := recordOf("mean-difference", &record.Data{Value: str("peel"), Group: str("line")})
	b.SetBytes(int64(len(text)))
	b.ReportAllocs()
	b.ResetTimer()
	for b.Loop() {
		tables, list := Load(rec, files)
		if len(list) > 0 || tables[Key{}].Used != 1_000_000 {
			b.Fatal(list, len(tables))
		}
	}
}

// BenchmarkBareCSV is what reading is measured against: the standard reader,
// its record reused, nothing done with the fields.
func BenchmarkBareCSV(b *testing.B) {
	text := million()
	files := inFile(text)
	b.SetBytes(int64(len(text)))
	b.ReportAllocs()
	b.ResetTimer()
	for b.Loop() {
		f, err := files.Open("lot.csv")
		if err != nil {
			b.Fatal(err)
		}
		r := csv.NewReader(f)
		r.ReuseRecord = true
		for n := 0; ; n++ {
			if _, err := r.Read(); err == io.EOF {
				if n != 1_000_001 {
					b.Fatal(n)
				}
				break
			} else if err != nil {
				b.Fatal(err)
			}
		}
	}
}
