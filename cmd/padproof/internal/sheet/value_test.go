package sheet

import (
	"encoding/csv"
	"errors"
	"math"
	"os"
	"strconv"
	"strings"
	"testing"
)

// rows reads a table of published values, without its head.
func rows(t *testing.T, name string) [][]string {
	t.Helper()
	f, err := os.Open("testdata/" + name)
	if err != nil {
		t.Fatal(err)
	}
	defer f.Close()
	all, err := csv.NewReader(f).ReadAll()
	if err != nil {
		t.Fatal(err)
	}
	return all[1:]
}

func near(got, want float64) bool {
	return math.Abs(got-want) <= 1e-12*math.Abs(want)
}

// IEC 60062:2016 resistor codes, the valid and the broken ones.
func TestParseOhmsPublishedCodes(t *testing.T) {
	for _, row := range rows(t, "resistor_codes_iec60062.csv") {
		got, err := ParseOhms(row[0])
		if row[1] == "" {
			if err == nil {
				t.Errorf("ParseOhms(%q) = %v, want an error", row[0], got.Value)
			}
			continue
		}
		want, _ := strconv.ParseFloat(row[1], 64)
		if err != nil || !near(got.Value, want) {
			t.Errorf("ParseOhms(%q) = %v, %v, want %v", row[0], got.Value, err, want)
		}
	}
}

// IEC 60062 tolerance letters behind a code.
func TestParseOhmsToleranceLetters(t *testing.T) {
	for _, row := range rows(t, "resistor_tolerance_letters_iec60062.csv") {
		perCent, _ := strconv.ParseFloat(row[1], 64)
		for _, code := range []string{"4R7", "1k5", "R47", "470R"} {
			got, err := ParseOhms(code + row[0])
			plain, _ := ParseOhms(code)
			if err != nil || !got.HasTol || !near(got.TolFrac, perCent/100) || got.Value != plain.Value {
				t.Errorf("ParseOhms(%q) = %+v, %v, want %v Ω ± %v %%", code+row[0], got, err, plain.Value, perCent)
			}
		}
	}
}

func TestParseAmounts(t *testing.T) {
	kinds := map[Kind]func(string) (Amount, error){Resistor: ParseOhms, Capacitor: ParseFarads, Inductor: ParseHenries}
	for _, c := range []struct {
		kind Kind
		text string
		want float64
	}{
		{Resistor, "0", 0}, {Resistor, "0R", 0}, {Resistor, "0R0", 0},
		{Resistor, "560", 560}, {Resistor, "680", 680}, {Resistor, " 560 ", 560}, // no three-digit code
		{Resistor, "0.5", 0.5}, {Resistor, ".5", 0.5}, {Resistor, "4.7k", 4700}, {Resistor, "4.7 K", 4700},
		{Resistor, "1k5", 1500}, {Resistor, "4r7", 4.7}, {Resistor, "10k", 10000}, {Resistor, "2.2M", 2.2e6},
		{Resistor, "4M7", 4.7e6}, {Resistor, "4.7 mΩ", 0.0047}, {Resistor, "100 mohm", 0.1}, {Resistor, "4.7 MΩ", 4.7e6},
		{Resistor, "560 Ω", 560}, {Resistor, "560Ω", 560}, {Resistor, "560 ohm", 560}, {Resistor, "560 Ohms", 560},
		{Resistor, "560 \u2126", 560}, // the ohm sign, a letter of its own in Unicode
		{Resistor, "1k5 Ω", 1500}, {Resistor, "10 kohm", 10000},
		{Capacitor, "220p", 220e-12}, {Capacitor, "2n2", 2.2e-9}, {Capacitor, "4u7", 4.7e-6}, {Capacitor, "100n", 100e-9},
		{Capacitor, "1µ", 1e-6}, {Capacitor, "1\u03bc", 1e-6}, {Capacitor, "0.1 µF", 1e-7}, {Capacitor, "n47", 0.47e-9},
		{Capacitor, "220pF", 220e-12}, {Capacitor, "4n7F", 4.7e-9}, {Capacitor, "4m7", 4.7e-3}, {Capacitor, "4n7K", 4.7e-9},
		{Inductor, "10m", 10e-3}, {Inductor, "4m7", 4.7e-3}, {Inductor, "100u", 100e-6}, {Inductor, "1.5 mH", 1.5e-3},
		{Inductor, "1H", 1}, {Inductor, "0.5 H", 0.5}, {Inductor, "0", 0}, {Inductor, "4m7K", 4.7e-3},
	} {
		got, err := kinds[c.kind](c.text)
		if err != nil || !near(got.Value, c.want) {
			t.Errorf("%s value %q = %v, %v, want %v", c.kind, c.text, got.Value, err, c.want)
		}
	}
}

func TestParseAmountsRefuse(t *testing.T) {
	kinds := map[Kind]func(string) (Amount, error){Resistor: ParseOhms, Capacitor: ParseFarads, Inductor: ParseHenries}
	for _, c := range []struct {
		kind  Kind
		texts []string
	}{
		{Resistor, []string{"", " ", "R", "k", "m", "4R7R", "33O", "-560", "+560", "NaN", "nan", "inf", "Inf", "1e3", "0x10",
			"4m7", "10m", "4.7m", "m47", "4m7K", "4R7k", "1k5k", "4R7Z", "4.7.1", "1.5k5", "5.", "4,7k", "5 6 0", "560 V", "Ω",
			"l10", "1g0", "100000G", "0.0000001", "560%", "٥٦٠", strings.Repeat("9", 400), strings.Repeat("0", 60000) + "x"}},
		{Capacitor, []string{"", "220", "0", "0p", "p", "F", "1", "1F", "100P", "2N2", "4U7", "4M7", "-220p", "220 pH", "1k", "2n2C",
			"4n7M7", "1000000000u", "0.0000001p", "2,2n"}},
		{Inductor, []string{"", "10", "m", "H", "10M", "4M7", "10mF", "220p", "-1m", "100000 H", "0.01n", "1,5m"}},
	} {
		for _, text := range c.texts {
			got, err := kinds[c.kind](text)
			var e *Error
			if err == nil || !errors.As(err, &e) || e.Text == "" || e.Hint == "" || got != (Amount{}) {
				t.Errorf("%s value %q = %+v, %v, want nothing and an error with a hint", c.kind, quoted(text), got, err)
			}
		}
	}
}

// The mend of a slip names what was slipped.
func TestValueHints(t *testing.T) {
	for _, c := range []struct{ text, want string }{
		{"33O", "write ohms, or an IEC 60062 code such as 330, 1k5, 4R7"},
		{"4m7", "large M"},
		{"4,7k", "a point, not a comma"},
		{"-560", "not negative"},
		{"100000G", "prefix"},
	} {
		_, err := ParseOhms(c.text)
		var e *Error
		if !errors.As(err, &e) || !strings.Contains(e.Hint, c.want) {
			t.Errorf("hint of ParseOhms(%q) = %+v, want %q in it", c.text, e, c.want)
		}
	}
}

func TestParseTolerance(t *testing.T) {
	for _, c := range []struct {
		text string
		want float64
	}{
		{"1%", 0.01}, {"0.1 %", 0.001}, {"5 %", 0.05}, {"0%", 0}, {"±5%", 0.05}, {"+/- 10 %", 0.1}, {"20%", 0.2}, {" 1% ", 0.01}, {"99.9%", 0.999},
	} {
		if got, err := ParseTolerance(c.text); err != nil || !near(got, c.want) {
			t.Errorf("ParseTolerance(%q) = %v, %v, want %v", c.text, got, err, c.want)
		}
	}
	for _, c := range []struct{ text, hint string }{
		{"", "per cent"}, {"1", `"1%"`}, {"0.01", `"0.01%"`}, {"-1%", "per cent"}, {"100%", "less than"}, {"1e400%", "per cent"},
		{"0,1%", "point"}, {"F", "per cent"}, {"nan%", "per cent"}, {strings.Repeat("9", 400) + "%", "less than"},
	} {
		got, err := ParseTolerance(c.text)
		var e *Error
		if !errors.As(err, &e) || !strings.Contains(e.Hint, c.hint) || got != 0 {
			t.Errorf("ParseTolerance(%q) = %v, %+v, want 0 and a hint with %q", quoted(c.text), got, err, c.hint)
		}
	}
}
