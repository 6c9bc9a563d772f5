package study

import (
	"errors"
	"math"
	"strings"
	"testing"

	"padproof/cmd/padproof/internal/result"
)

func TestReadCSV(t *testing.T) {
	want := []Reading{{"anna", "0417", "1", 13.57}, {"berta", "0418", "2", -1e-3}}
	for name, text := range map[string]string{
		"plain":                  "operator,unit,repeat,value\nanna,0417,1,13.57\nberta,0418,2,-0.001\n",
		"other names and order":  "Loss_dB,Trial,Part,Appraiser\n13.57,1,0417,anna\n-1e-3,2,0418,berta\n",
		"semicolons and commas":  "operator;unit;repeat;value\nanna;0417;1;13,57\nberta;0418;2;-0,001\n",
		"a mark, blanks, quotes": "\ufeffoperator, unit, repeat, value, remark\n\"anna\", 0417 ,1, 13.57,x\nberta,0418,2,-.001,\n",
		"lines of another kind":  "operator,unit,repeat,value\r\nanna,0417,1,13.57\r\n\r\nberta,0418,2,-0.001",
	} {
		d, err := ReadCSV("readings.csv", strings.NewReader(text))
		if err != nil || len(d.Readings) != 2 || d.Readings[0] != want[0] || d.Readings[1] != want[1] || d.Limit.IsSet() {
			t.Errorf("%s: %+v, %v, want %v", name, d, err, want)
		}
	}
}

func TestReadCSVFaults(t *testing.T) {
	const head = "operator,unit,repeat,value\n"
	for _, c := range []struct {
		name, text string
		line       int
		says       string
	}{
		{"nothing", "", 0, "is empty"},
		{"no value", "operator,unit\n", 1, "no column is the value"},
		{"two units", "operator,unit,part,value\n", 1, "two columns are the unit"},
		{"no operator", head + "anna,0417,1,1\n,0417,1,1\n", 3, "the operator is missing"},
		{"no reading", head + "anna,0417,1,\n", 2, "is no reading"},
		{"infinite", head + "anna,0417,1,Inf\n", 2, "is no reading"},
		{"too large", head + "anna,0417,1,1e999\n", 2, "is no reading"},
		{"decimal comma", head + "anna,0417,1,13,57\n", 2, "wrong number of fields"},
		{"stray quote", head + "anna,\"0417,1,1\n", 2, "quote"},
		{"twice", head + "anna,0417,1,1\nanna,0417,2,1\nanna,0417,1,1\n", 4, "(line 2 has it too)"},
	} {
		t.Run(c.name, func(t *testing.T) {
			d, err := ReadCSV("readings.csv", strings.NewReader(c.text))
			var e *result.Error
			if !errors.As(err, &e) || d != nil {
				t.Fatalf("got %+v, %v, want an error", d, err)
			}
			if e.File != "readings.csv" || e.Line != c.line || !strings.Contains(e.Text, c.says) || e.Hint == "" {
				t.Errorf("got %+v, want line %d, %q and a hint", e, c.line, c.says)
			}
		})
	}
}

// Whatever is in a table, there are finite readings or an error.
func FuzzReadCSV(f *testing.F) {
	f.Add("operator,unit,repeat,value\nanna,0417,1,13.57\n")
	f.Add("operator;unit;value\nanna;0417;13,57\n")
	f.Fuzz(func(t *testing.T, text string) {
		d, err := ReadCSV("readings.csv", strings.NewReader(text))
		if (d == nil) == (err == nil) {
			t.Fatalf("%+v, %v", d, err)
		}
		if err != nil {
			return
		}
		for _, r := range d.Readings {
			if math.IsNaN(r.Value) || math.IsInf(r.Value, 0) || r.Operator == "" || r.Unit == "" {
				t.Fatalf("a reading %+v", r)
			}
		}
		_, _ = Of(d)
	})
}
