package sheet

import (
	"math"
	"reflect"
	"strings"
	"testing"
)

func parseOhmsSheet(file string, data []byte) error {
	o, err := ParseOhmsSheet(file, data)
	if err != nil && o != nil {
		panic("readings beside the error")
	}
	return err
}

const soundOhms = `meter_tolerance = "1 %"
meter_plus_ohms = 0.3
readings = [
  { pins = ["out.hot", "out.cold"], ohms = 33 },
  { pins = ["in.hot", "in.cold"], joined = ["out.hot", "out.cold"], ohms = "1k12" },
  { pins = ["in.hot", "screen"], ohms = "open" },
  { pins = ["in.hot", "mid"], ohms = "0" },
]
`

func TestParseOhmsSheet(t *testing.T) {
	o, err := ParseOhmsSheet("ohms.toml", []byte(soundOhms))
	if err != nil {
		t.Fatal(err)
	}
	want := []Reading{
		{Pins: [2]string{"out.hot", "out.cold"}, Ohms: 33, Line: 4},
		{Pins: [2]string{"in.hot", "in.cold"}, Joined: [2]string{"out.hot", "out.cold"}, Ohms: 1120, Line: 5},
		{Pins: [2]string{"in.hot", "screen"}, Ohms: math.Inf(1), Line: 6},
		{Pins: [2]string{"in.hot", "mid"}, Line: 7},
	}
	if !reflect.DeepEqual(o.Readings, want) {
		t.Errorf("readings = %+v, want %+v", o.Readings, want)
	}
	sameFigure(t, "meter_tolerance", o.MeterTolFrac, 0.01)
	sameFigure(t, "meter_plus_ohms", o.MeterPlusOhms, 0.3)
	if o.Simulated {
		t.Error("simulated without the key")
	}
	if e := o.Errorf(o.Readings[1], "mend", "%d wrong", 2); e.Error() != "ohms.toml:5: 2 wrong" || e.Hint != "mend" {
		t.Errorf("Errorf = %v, hint %q", e, e.Hint)
	}
}

// What is written reads back as it was, tables as sections too.
func TestOhmsText(t *testing.T) {
	o, err := ParseOhmsSheet("ohms.toml", []byte("simulated = true\n"+soundOhms))
	if err != nil {
		t.Fatal(err)
	}
	text := o.Text("SIMULATED", "by hand")
	if !strings.HasPrefix(text, "# SIMULATED\n# by hand\nsimulated = true\n") {
		t.Errorf("text begins %q", text)
	}
	back, err := ParseOhmsSheet("ohms.toml", []byte(text))
	if err != nil {
		t.Fatalf("%v in\n%s", err, text)
	}
	for i := range back.Readings {
		back.Readings[i].Line = o.Readings[i].Line
	}
	if !reflect.DeepEqual(back, o) {
		t.Errorf("read back %+v, want %+v", back, o)
	}
	long, err := ParseOhmsSheet("ohms.toml", []byte("[[readings]]\npins = [\"out.hot\", \"screen\"]\nohms = 330\n"))
	if err != nil || len(long.Readings) != 1 || long.Readings[0].Line != 1 {
		t.Errorf("[[readings]] = %+v, %v", long, err)
	}
}

func TestOhmsFaults(t *testing.T) {
	one := func(fields string) string { return "readings = [\n  { " + fields + " },\n]\n" }
	checkFaults(t, "ohms.toml", parseOhmsSheet, []fault{
		{"empty", "# nothing\n", 0, "empty", "readings = ["},
		{"no readings", "meter_plus_ohms = 1\n", 0, "readings is missing", "readings = ["},
		{"readings no list", "readings = 3\n", 1, "is a number, not a list", "pins"},
		{"reading no table", "readings = [\n 330,\n]\n", 2, "reading 1 is a number", "pins"},
		{"unknown key", one(`pins = ["out.hot", "screen"], ohm = 3`), 2, "unknown key", "ohms"},
		{"key of a pad", "network = \"U\"\nreadings = []\n", 1, "unknown key network", "belongs in pad.toml"},
		{"no pins", one(`ohms = 3`), 2, "pins is missing", "out.cold"},
		{"one pin", one(`pins = ["out.hot"], ohms = 3`), 2, "is not two pins", "write two"},
		{"pins of numbers", one(`pins = [2, 3], ohms = 3`), 2, "is not two pins", "write two"},
		{"a pin twice", one(`pins = ["out.hot", "out.hot"], ohms = 3`), 2, `names "out.hot" twice`, "different"},
		{"a joined pin twice", one(`pins = ["out.hot", "screen"], joined = ["in.hot", "in.hot"], ohms = 3`), 2, `names "in.hot" twice`, "different"},
		{"joined where the meter is", one(`pins = ["out.hot", "screen"], joined = ["screen", "out.hot"], ohms = 3`), 2, "the pins that the meter is on", "other end"},
		{"no ohms", one(`pins = ["out.hot", "screen"]`), 2, "ohms is missing", "open"},
		{"negative", one(`pins = ["out.hot", "screen"], ohms = -3`), 2, "below nothing", "zero the meter"},
		{"no number", one(`pins = ["out.hot", "screen"], ohms = nan`), 2, "is no reading", "IEC 60062"},
		{"words", one(`pins = ["out.hot", "screen"], ohms = "much"`), 2, `"much" is no reading`, "IEC 60062"},
		{"tolerance letter", one(`pins = ["out.hot", "screen"], ohms = "4R7K"`), 2, "tolerance letter", "meter_tolerance"},
		{"truth", one(`pins = ["out.hot", "screen"], ohms = true`), 2, "not a reading", "330"},
		{"tolerance without sign", "meter_tolerance = 0.5\nreadings = []\n", 1, "without a sign", "0.5%"},
		{"plus negative", "meter_plus_ohms = -1\nreadings = []\n", 1, "must lie", "0.2"},
		{"too many", "readings = [" + strings.Repeat("{},", 101) + "]\n", 1, "101 readings", "up to 100"},
	})
}

func TestParseReading(t *testing.T) {
	open := math.Inf(1)
	for text, want := range map[string]Reading{
		"out.hot,out.cold=33":                                    {Pins: [2]string{"out.hot", "out.cold"}, Ohms: 33},
		" in.hot , screen = open ":                               {Pins: [2]string{"in.hot", "screen"}, Ohms: open},
		"in.hot to out.hot=OL":                                   {Pins: [2]string{"in.hot", "out.hot"}, Ohms: open},
		"in.hot,in.cold with out.hot,out.cold joined=1120":       {Pins: [2]string{"in.hot", "in.cold"}, Joined: [2]string{"out.hot", "out.cold"}, Ohms: 1120},
		"out.hot to screen, with in.hot and screen joined = 1k5": {Pins: [2]string{"out.hot", "screen"}, Joined: [2]string{"in.hot", "screen"}, Ohms: 1500},
		"in.hot,mid.hot=4.7 kΩ":                                  {Pins: [2]string{"in.hot", "mid.hot"}, Ohms: 4700},
	} {
		if got, err := ParseReading(text); err != nil || got != want {
			t.Errorf("ParseReading(%q) = %+v, %v, want %+v", text, got, err, want)
		}
	}
	for text, says := range map[string]string{
		"":                      "is no ohmmeter reading",
		"out.hot=33":            "is no ohmmeter reading",
		"out.hot,out.cold":      "is no ohmmeter reading",
		"out.hot,out.cold=":     "is no reading",
		"out.hot,out.hot=3":     "twice",
		"out.hot,out.cold=-3":   "below nothing",
		"out.hot,out.cold=33,5": "is no reading",
		"out.hot,out.cold with out.cold,out.hot joined=0": "that the meter is on",
		"out.hot,out.cold with in.hot joined=33":          "is no ohmmeter reading",
	} {
		_, err := ParseReading(text)
		if e, ok := err.(*Error); !ok || !strings.Contains(e.Text, says) || e.Hint == "" {
			t.Errorf("ParseReading(%q): %v, want %q and a hint", text, err, says)
		}
	}
}
