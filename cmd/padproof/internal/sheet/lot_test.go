package sheet

import (
	"errors"
	"maps"
	"testing"
)

func TestParseLot(t *testing.T) {
	l, err := ParseLot("lot.toml", []byte("name = \"Saltmarsh lot 12\"\n[channels]\n1 = \"0417\"\n3 = \"0419\"\n"))
	if err != nil {
		t.Fatal(err)
	}
	if want := map[int]string{1: "0417", 3: "0419"}; l.Name != "Saltmarsh lot 12" || !maps.Equal(l.Channels, want) {
		t.Errorf("ParseLot = %+v, want the name and %v", l, want)
	}
}

func TestParseLotFaults(t *testing.T) {
	for _, c := range []struct {
		name, text string
		line       int
	}{
		{"channel 0", "[channels]\n0 = \"0417\"\n", 2},
		{"no channel", "[channels]\nleft = \"0417\"\n", 2},
		{"twice", "[channels]\n1 = \"a17\"\n2 = \"A17\"\n", 3},
		{"empty serial", "[channels]\n1 = \" \"\n", 2},
		{"a number", "[channels]\n1 = 417\n", 2},
		{"none", "name = \"x\"\n[channels]\n", 2},
		{"unknown key", "nmae = \"x\"\n", 1},
		{"empty", "", 0},
	} {
		t.Run(c.name, func(t *testing.T) {
			_, err := ParseLot("lot.toml", []byte(c.text))
			var e *Error
			if !errors.As(err, &e) {
				t.Fatalf("ParseLot = %v, want an *Error", err)
			}
			if e.Line != c.line || e.Text == "" || e.Hint == "" {
				t.Errorf("ParseLot: %+v, want line %d, a text and a hint", e, c.line)
			}
		})
	}
}
