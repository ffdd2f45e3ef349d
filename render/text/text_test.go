package text

import (
	"os"
	"testing"

	"steelyard/render"
	"steelyard/render/internal/fixture"
	"steelyard/render/pdf"
)

func TestDump(t *testing.T) {
	in, res := fixture.Trial()
	Write(os.Stdout, render.Compose(in, res), Options{Full: true})
	f, _ := os.Create("/tmp/compose/trial.pdf")
	if err := pdf.Write(f, render.Compose(in, res)); err != nil { t.Error(err) }
	f.Close()
	in, res = fixture.Peel()
	Write(os.Stdout, render.Compose(in, res), Options{})
	f, _ = os.Create("/tmp/compose/peel.pdf")
	if err := pdf.Write(f, render.Compose(in, res)); err != nil { t.Error(err) }
	f.Close()
}
