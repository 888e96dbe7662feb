package main

import (
	"bytes"
	"math"
	"path/filepath"
	"strings"
	"testing"

	"cavitywright/sim/figure"
)

// TestScenarioDisc is a disc that shines one way: a limaçon of 5 µm, n = 3.3,
// in both polarisations. The radius changes none of it; the lobe at eps = 0.40
// is 27 deg wide in TM (an independent run; about 30 by Yan et al., Appl. Phys.
// Lett. 94, 251101 (2009)).
func TestScenarioDisc(t *testing.T) {
	folder := t.TempDir()
	sheet := func(radius string) emissionSheet {
		table := fine(t, "", "make", "limacon", "radius="+radius, "eps=0.40", "unit=um", "--coat", "limacon:1:0:1:dielectric:index=3.3")
		var s emissionSheet
		parsed(t, fine(t, table, "emission", "-", "--polarisation", "both", "--json", "-o", filepath.Join(folder, "far.svg")), &s)
		return s
	}
	five, seven := sheet("5"), sheet("7")
	if five.Unit != "µm" || len(five.Fields) != 2 || five.Bin != 0.5 || !strings.Contains(five.Start, "0.303") {
		t.Errorf("the sheet is %+v", five)
	}
	for i, want := range []float64{0.50, 0.72} {
		f, g := five.Fields[i], seven.Fields[i]
		if math.Abs(f.WindowShare.Value-want) > 0.01+3*f.WindowShare.Err {
			t.Errorf("%s: the window share is %+v, want %g", f.Polarisation, f.WindowShare, want)
		}
		if math.Abs(f.WindowShare.Value-g.WindowShare.Value) > 4*math.Hypot(f.WindowShare.Err, g.WindowShare.Err) {
			t.Errorf("%s: with another radius the window share is %+v, not %+v", f.Polarisation, g.WindowShare, f.WindowShare)
		}
		if math.Abs(f.Account.Balance) > 1e-12 || f.MeetsAgain != nil || len(f.Angles) != 720 || len(f.Intensity) != 720 {
			t.Errorf("%s: %+v, %d bins", f.Polarisation, f.Account, len(f.Angles))
		}
	}
	if w := five.Fields[0].LobeWidth; math.Abs(w.Value-27) > 0.5+4.3*w.Err {
		t.Errorf("the lobe is %+v deg wide, want 27", w)
	}
	picture := content(t, filepath.Join(folder, "far.svg"))
	for _, word := range []string{"TM (E out of plane)", "TE (E in plane)", "bins of 0.5°", "still inside"} {
		if !bytes.Contains(picture, []byte(word)) {
			t.Errorf("the figure does not say %q", word)
		}
	}
}

// TestScenarioHole is where to put the hole: the D of a disc cut at half its
// radius, a hole 0.3 wide (rates by an independent run; leading formula 0.0378).
func TestScenarioHole(t *testing.T) {
	folder := t.TempDir()
	d := fine(t, "", "make", "cut-disc", "radius=1", "distance=0.5", "--coat", "cut-disc:1:0.4:0.6:opening")
	var p placementRow
	parsed(t, fine(t, d, "placement", "-", "--width", "0.3", "--begin", "30", "--end", "100", "--json", "-o", filepath.Join(folder, "p.csv")), &p)
	w := p.Widths[0]
	if math.Abs(w.Naive-0.0378) > 0.00005 || len(p.Places) != 200 || len(w.Rates) != 200 {
		t.Fatalf("%d places, naive rate %g", len(p.Places), w.Naive)
	}
	at := func(s, want float64) {
		i := int(s / p.Places[199] * 199.5)
		if got, err := *w.Rates[i], *w.Errs[i]; math.Abs(got-want) > 0.001+3*err {
			t.Errorf("at s = %g the rate is %g ± %g, want %g", p.Places[i], got, err, want)
		}
	}
	at(math.Sqrt(3)/2, 0.0302)
	at(math.Sqrt(3)+0.15, 0.0433)
	slow := false
	for _, s := range w.Slow {
		slow = slow || s
	}
	if !slow {
		t.Error("no place is said to slow")
	}
	if text := string(content(t, filepath.Join(folder, "p.csv"))); !strings.Contains(text, "it slows after path 100") || !strings.Contains(text, "curve,x,y,stderr") {
		t.Errorf("the file begins with %q", text[:200])
	}
	var f survivalRow
	parsed(t, fine(t, d, "survival", "-", "--until", "250", "--json", "--effort", "0.2"), &f)
	if f.Window == nil || f.Tail == nil || math.Abs(f.Account.Balance) > 1e-12 || f.Naive == nil {
		t.Errorf("survival finds %+v and %+v", f.Window, f.Tail)
	}
}

// TestScenarioPosts is three posts at a separation of six radii: the rate
// 0.41033840776934649 per length within its own error bar (Gaspard and Rice, J.
// Chem. Phys. 90, 2225 (1989)), and a survival that falls exponentially.
func TestScenarioPosts(t *testing.T) {
	const want = 0.41033840776934649
	posts := fine(t, "", "make", "three-posts", "radius=1", "separation=6")
	var f survivalRow
	parsed(t, fine(t, posts, "survival", "-", "--json", "--effort", "0.2"), &f)
	if f.Window == nil || f.Tail != nil || math.Abs(f.Window.Rate-want) > 3*f.Window.Err || f.Naive != nil {
		t.Errorf("the window is %+v, the tail %+v", f.Window, f.Tail)
	}
	if testing.Short() {
		return // the next takes some twenty processor seconds
	}
	var r struct {
		Readings []figure.Scalar `json:"readings"`
	}
	parsed(t, fine(t, posts, "readings", "-", "--only", "escape-rate", "--json"), &r)
	if e := r.Readings[0]; math.Abs(e.Value-want) > 3*e.StdErr || e.StdErr > 1e-3*want {
		t.Errorf("the rate is %g ± %g, want %g to 1e-3", e.Value, e.StdErr, want)
	}
}

// TestLeakFigures writes every figure of what leaves in every format, and wants
// the same bytes from another number of workers.
func TestLeakFigures(t *testing.T) {
	folder := t.TempDir()
	d := filepath.Join(folder, "d.cavity.json")
	fine(t, "", "make", "cut-disc", "radius=1", "distance=0.5", "--coat", "cut-disc:1:0.4:0.6:opening", "--coat", "cut-disc:2:0.1:0.2:opening", "-o", d)
	for name, args := range map[string][]string{
		"survival": {"survival", d, "--log", "--effort", "0.02"}, "bounces": {"survival", d, "--by", "bounce", "--from", "area", "--effort", "0.02"},
		"lifetime": {"lifetime", d, "--columns", "40", "--rows", "30"}, "pasts": {"lifetime", d, "--of", "pasts", "--columns", "40", "--rows", "30"},
		"polar": {"emission", d, "--norm", "area", "--effort", "0.2"}, "cartesian": {"emission", d, "--plot", "cartesian", "--effort", "0.2"}, "wall": {"emission", d, "--plot", "wall", "--effort", "0.2"},
		"transmission": {"transmission", d, "--effort", "0.02"}, "placement": {"placement", d, "--width", "0.2,0.3", "--places", "30", "--effort", "0.05"},
		"map": {"placement", d, "--width", "0.1:0.5:5", "--map", "--places", "30", "--effort", "0.05"},
	} {
		for _, ending := range []string{"png", "svg", "pdf", "csv"} {
			out := filepath.Join(folder, name+"."+ending)
			line := append(append([]string{}, args...), "-o", out, "--dpi", "100")
			fine(t, "", line...)
			first := content(t, out)
			if ending != "svg" && ending != "csv" {
				continue
			}
			fine(t, "", append(line, "--workers", "5")...)
			if !bytes.Equal(first, content(t, out)) {
				t.Errorf("%s: five workers write another file", out)
			}
			if ending == "svg" {
				if text := fine(t, "", "check", out); !strings.Contains(text, "Cut disc") {
					t.Errorf("%s carries %q", out, text)
				}
			}
		}
	}
}

// TestLeakLists wants the numbers as a list where no JSON is asked for, also beside
// a figure, and the rows of the matrix to add up to 1.
func TestLeakLists(t *testing.T) {
	d := fine(t, "", "make", "cut-disc", "--coat", "cut-disc:1:0.4:0.6:opening", "--coat", "cut-disc:2:0.1:0.2:opening")
	for _, c := range []struct {
		args  []string
		words []string
	}{
		{[]string{"survival", "-", "--effort", "0.02", "-o", filepath.Join(t.TempDir(), "s.svg")}, []string{"rate in the window"}},
		{[]string{"survival", "-", "--effort", "0.02"}, []string{"rate in the window", "mean path until gone", "1/mm"}},
		{[]string{"emission", "-", "--effort", "0.2"}, []string{"window share", "lobe width", "entropy"}},
		{[]string{"transmission", "-", "--effort", "0.02"}, []string{"opening 1 to 2", "mean dwell"}},
		{[]string{"placement", "-", "--width", "0.3", "--effort", "0.05"}, []string{"greatest, s = ", "least, s = "}},
	} {
		text := fine(t, d, c.args...)
		for _, w := range c.words {
			if !strings.Contains(text, w) {
				t.Errorf("%v does not say %q: %s", c.args, w, text)
			}
		}
	}
	var r transmissionRow
	parsed(t, fine(t, d, "transmission", "-", "--json", "--effort", "0.2"), &r)
	for _, p := range r.Ports {
		sum := p.Elsewhere + p.Absorbed + p.Kept
		for _, s := range p.Shares {
			sum += s.Value
		}
		if math.Abs(sum-1) > 1e-12 {
			t.Errorf("a row adds up to 1 %+g", sum-1)
		}
	}
	if math.Abs(r.Dwell.Value-r.Expect) > 4*r.Dwell.Err {
		t.Errorf("the mean dwell is %+v, want %g", r.Dwell, r.Expect)
	}
}
