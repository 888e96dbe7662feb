package wall

import (
	"strings"
	"testing"

	"cavitywright/table/param"
)

// Every law has words of its own, without the name of a type; the two
// polarisations say which field they mean.
func TestWords(t *testing.T) {
	seen := map[string]string{}
	for _, k := range Kinds() {
		l, err := Make(k.Name, param.Defaults(k.Specs))
		if err != nil {
			t.Fatal(err)
		}
		s := Short(l)
		if other, twice := seen[s]; twice || s == "" || strings.ContainsAny(s, "{}") {
			t.Errorf("%s is called %q, as is %q", k.Name, s, other)
		}
		seen[s] = k.Name
	}
	if s := Short(Dielectric{3.3, 1.45, TE}); s != "dielectric, n = 3.3 to 1.45, TE" {
		t.Errorf("a dielectric is called %q", s)
	}
	if TM.String() != "TM (E out of plane)" || TE.String() != "TE (E in plane)" {
		t.Errorf("the polarisations are called %q and %q", TM, TE)
	}
}
