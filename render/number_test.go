package render

import "testing"

func TestDecimalHasNoNoise(t *testing.T) {
	for _, c := range []struct {
		n    int64
		exp  int
		want string
	}{{3, -1, "0.3"}, {-3, -1, "−0.3"}, {0, -1, "0.0"}, {12, 0, "12"}, {12, 2, "1200"}, {5, -4, "0.0005"}, {-12345, -2, "−123.45"}} {
		if got := decimal(c.n, c.exp); got != c.want {
			t.Errorf("%d * 10^%d: %q, want %q", c.n, c.exp, got, c.want)
		}
	}
}

func TestUnitText(t *testing.T) {
	for in, want := range map[string]string{
		"um": "µm", "1/um": "1/µm", "um2": "µm²", "um²": "µm²", "mm": "mm", "mm3": "mm³", "m2": "m²",
		"": "", "1/bounce": "1/bounce", "rad": "rad", "sum": "sum", "µm": "µm", "°": "°",
	} {
		if got := unitText(in); got != want {
			t.Errorf("%q is printed %q, want %q", in, got, want)
		}
	}
}
