package sheet

import (
	"errors"
	"strings"
	"testing"
)

const soundParts = `parts = [
  { ref = "R1", value = "560", tolerance = "1%" },
  { ref = "R2", value = "560", tolerance = "1%" },
  { ref = "R3", value = "330", tolerance = "1%" },
]
`

// soundPad takes six lines; what follows it begins on the seventh.
const soundPad = "network = \"U\"\n" + soundParts

// fault is a sheet with something wrong: the line, words of the text and of the
// mend that must be there.
type fault struct {
	name, text string
	line       int
	says, mend string
}

func checkFaults(t *testing.T, file string, parse func(string, []byte) error, faults []fault) {
	t.Helper()
	for _, f := range faults {
		t.Run(f.name, func(t *testing.T) {
			err := parse(file, []byte(f.text))
			var e *Error
			if !errors.As(err, &e) {
				t.Fatalf("got %v, want an *Error", err)
			}
			if e.File != file || e.Line != f.line || !strings.Contains(e.Text, f.says) || !strings.Contains(e.Hint, f.mend) || e.Hint == "" {
				t.Errorf("got line %d, %q, hint %q\nwant line %d, %q, hint %q", e.Line, e.Error(), e.Hint, f.line, f.says, f.mend)
			}
		})
	}
}

func parsePad(file string, data []byte) error {
	p, err := ParsePad(file, data)
	if err != nil && p != nil {
		return errors.New("a pad beside the error")
	}
	return err
}

func parseRig(file string, data []byte) error {
	r, err := ParseRig(file, data)
	if err != nil && r != nil {
		return errors.New("a rig beside the error")
	}
	return err
}

func TestPadFormFaults(t *testing.T) {
	checkFaults(t, "pad.toml", parsePad, []fault{
		{"text without quotes", "network = \"U\"\nname = Salt\n", 2, "", "quotes"},
		{"quotes left open", "network = \"U\n", 1, "", "quotes"},
		{"bracket left open", "network = \"U\"\nparts = [\n{ ref = \"R1\" },\n", 3, "incomplete", "bracket"},
		{"section left open", soundPad + "[limits\n", 7, "", "bracket"},
		{"decimal comma", soundPad + "[limits]\nloss_plus_minus_db = 0,3\n", 8, "", "point"},
		{"no equals sign", "network \"U\"\n", 1, "", "key = value"},
		{"no value", "network =\n", 1, "", ""},
		{"key twice", "network = \"U\"\nname = \"A\"\nname = \"B\"\n", 3, "name is written twice (line 2", "keep one"},
		{"key twice in a part", "network = \"L\"\nparts = [\n{ ref = \"R1\",\nvalue = \"1\",\nvalue = \"2\" },\n]\n", 5, "parts[0].value is written twice (line 4", "keep one"},
		{"section twice", soundPad + "[limits]\n[service]\n[limits]\n", 9, "already", "keep one"},
		{"number too large", soundPad + "[limits]\nloss_plus_minus_db = 99999999999999999999\n", 8, "too large", ""},
		{"outsized key", strings.Repeat("k", 100) + " = 1\n", 1, "over 64 letters", ""},
		{"nested too deep", "network = \"U\"\nparts = " + strings.Repeat("[", 20000) + "\n", 2, "nested", "two deep"},
		{"NUL", "network = \"U\x00\"\n", 1, "control", ""},
	})
}

func TestPadKeyFaults(t *testing.T) {
	checkFaults(t, "pad.toml", parsePad, []fault{
		{"unknown key", soundPad + "[limits]\nloss_plusminus_db = 0.3\n", 8, "unknown key limits.loss_plusminus_db", "did you mean loss_plus_minus_db?"},
		{"unknown key, not near any", soundPad + "colour = \"red\"\n", 7, "unknown key colour", "network"},
		{"unknown key of a part", "network = \"U\"\nparts = [\n{ ref = \"R1\", value = \"1\", tolerence = \"1%\" },\n]\n", 3, "unknown key part R1: tolerence", "did you mean tolerance?"},
		{"unknown section", soundPad + "[limit]\nloss_plus_minus_db = 0.3\n", 7, "unknown key limit", "did you mean limits?"},
		{"key outside its section", soundPad + "loss_plus_minus_db = 0.3\n", 7, "unknown key loss_plus_minus_db", "under [limits]"},
		{"key inside a section", "network = \"U\"\n[limits]\n" + soundParts, 3, "unknown key limits.parts", "at the top"},
		{"key of the other sheet", soundPad + "[output]\nsource_ohms = 1\n", 7, "unknown key output", "rig.toml"},
		{"odd key", soundPad + "\"µ\\u001b\" = 1\n", 7, `unknown key "µ\x1b"`, ""},
		{"no network", soundParts, 0, "network is missing", "bridged-T"},
		{"network in the wrong case", "network = \"u\"\n" + soundParts, 1, `"u" is not known`, `did you mean "U"`},
		{"network unknown", "network = \"X\"\n" + soundParts, 1, `"X" is not known`, "L, U, T, H, pi, O, bridged-T or custom"},
		{"network misspelt", "network = \"bridged T\"\n" + soundParts, 1, "", `did you mean "bridged-T"`},
		{"network empty", "network = \"\"\n" + soundParts, 1, "is not known", ""},
		{"network a number", "network = 3\n" + soundParts, 1, "network is a number, not text", "quotes"},
		{"name a list", "name = []\nnetwork = \"U\"\n" + soundParts, 1, "name is a list, not text", ""},
		{"name with an escape", "name = \"a\\u001b[2J\"\nnetwork = \"U\"\n" + soundParts, 1, "control character", ""},
		{"section a number", "network = \"U\"\nlimits = 3\n" + soundParts, 2, "limits is a number, not a section", "[limits]"},
		{"section a list", soundPad + "[[limits]]\n", 7, "limits is a list, not a section", "[limits]"},
		{"service load in quotes", soundPad + "[service]\nload_ohms = \"2k7\"\n", 8, "service.load_ohms is text, not a number", "load_ohms = 2700"},
		{"service load 0", soundPad + "[service]\nload_ohms = 0\n", 8, "service.load_ohms is 0", "hardly any load"},
		{"service source negative", soundPad + "[service]\nsource_ohms = -1\n", 8, "is -1", "from 0"},
		{"drive misspelt", soundPad + "[service]\ndrive = \"balance\"\n", 8, `service.drive "balance" is not known`, `did you mean "balanced"`},
		{"sense of a drive", soundPad + "[service]\nsense = \"impedance-balanced\"\n", 8, "is not known", "floating"},
	})
}

func TestLimitFaults(t *testing.T) {
	checkFaults(t, "pad.toml", parsePad, []fault{
		{"zero", soundPad + "[limits]\nloss_plus_minus_db = 0\n", 8, "limits.loss_plus_minus_db is 0; it must lie above 0", "0.3"},
		{"negative", soundPad + "[limits]\nsteady_within_db = -0.1\n", 8, "is -0.1", ""},
		{"NaN", soundPad + "[limits]\nleg_match_db = nan\n", 8, "is NaN", ""},
		{"infinite", soundPad + "[limits]\nhum_max_dbu = -inf\n", 8, "is -Inf", ""},
		{"loss with a sign", soundPad + "[limits]\nloss_nominal_db = -14.0\n", 8, "is -14", "positive"},
		{"distortion without one", soundPad + "[limits]\ndistortion_max_db = 80.0\n", 8, "is 80", "below 0"},
		{"quotes", soundPad + "[limits]\nloss_plus_minus_db = \"0.3\"\n", 8, "is text, not a number", "loss_plus_minus_db = 0.3"},
		{"truth in quotes", soundPad + "[limits]\nsame_polarity = \"true\"\n", 8, "limits.same_polarity is text, not true or false", "without quotes"},
		{"date", soundPad + "[limits]\nleg_match_db = 2020-01-01\n", 8, "is a date or time", ""},
		{"band the wrong way", soundPad + "[limits]\nresponse_from_hz = 200\nresponse_to_hz = 100\n", 8, "no band", ""},
		{"band below its default", soundPad + "[limits]\nresponse_to_hz = 10\n", 8, "limits.response_to_hz leaves no band", "20 and 20000"},
		{"decision", soundPad + "[limits]\ndecision = \"share\"\n", 8, `"share" is not known`, `did you mean "shared"`},
	})
}

func TestPartFaults(t *testing.T) {
	one := func(part string) string { return "network = \"custom\"\nparts = [\n" + part + "\n]\n" }
	between := `between = ["in.hot", "out.hot"]`
	checkFaults(t, "pad.toml", parsePad, []fault{
		{"no value", one(`{ ref = "R3", ` + between + ` }`), 3, "part R3: value is missing", "4R7"},
		{"letter O for 0", "network = \"U\"\nparts = [\n{ ref = \"R1\", value = \"560\" },\n{ ref = \"R2\", value = \"560\" },\n\n# shunt\n{ ref = \"R3\", value = \"33O\" },\n]\n",
			7, `part R3: "33O" is no resistor value`, "write ohms, or an IEC 60062 code such as 330, 1k5, 4R7"},
		{"value of a list", one(`{ ref = "R3", value = [1], ` + between + ` }`), 3, "part R3: value is a list, not text", ""},
		{"value empty", one(`{ ref = "R3", value = "", ` + between + ` }`), 3, `part R3: "" is no resistor value`, ""},
		{"value negative", one(`{ ref = "R3", value = -5, ` + between + ` }`), 3, `"-5" is no resistor value`, "not negative"},
		{"value NaN", one(`{ ref = "R3", value = nan, ` + between + ` }`), 3, "no resistor value", ""},
		{"value infinite", one(`{ ref = "R3", value = inf, ` + between + ` }`), 3, "beyond any resistor", "1 TΩ"},
		{"capacitor of a number", one(`{ ref = "C1", value = 220, ` + between + ` }`), 3, "no capacitor value", "220p"},
		{"capacitor of 0", one(`{ ref = "C1", value = 0, ` + between + ` }`), 3, "no capacitor", "resistor of 0"},
		{"capacitor as a resistor", one(`{ ref = "R1", value = "220p", ` + between + ` }`), 3, "no resistor value", ""},
		{"no ref", one(`{ value = "1", ` + between + ` }`), 3, "part 1: ref is missing", "R is a resistor"},
		{"ref of another kind", one(`{ ref = "Q1", value = "1", ` + between + ` }`), 3, `"Q1" is no part's ref`, "capacitor"},
		{"ref in small letters", one(`{ ref = "r1", value = "1", ` + between + ` }`), 3, `"r1" is no part's ref`, "R1"},
		{"ref a number", one(`{ ref = 1, value = "1", ` + between + ` }`), 3, "part 1: ref is a number", ""},
		{"tolerance a number", one(`{ ref = "R1", value = "1", tolerance = 1, ` + between + ` }`), 3, "tolerance is a number without a sign", `tolerance = "1%"`},
		{"tolerance without its sign", one(`{ ref = "R1", value = "1", tolerance = "1", ` + between + ` }`), 3, `"1" is no tolerance`, `"1%"`},
		{"tolerance and letter", one(`{ ref = "R1", value = "4R7K", tolerance = "1%", ` + between + ` }`), 3, "differ", "keep one"},
		{"ref twice", one("{ ref = \"R1\", value = \"1\", " + between + " },\n{ ref = \"R1\", value = \"1\", " + between + " }"), 4, "part R1 is there twice (line 3", ""},
		{"ref twice but for case", one("{ ref = \"Ra\", value = \"1\", " + between + " },\n{ ref = \"RA\", value = \"1\", " + between + " }"), 4, "part RA is there twice (line 3", ""},
		{"no place in a custom network", one(`{ ref = "R1", value = "1" }`), 3, "part R1 does not say where it sits", "between ="},
		{"one node", one(`{ ref = "R1", value = "1", between = ["in.hot"] }`), 3, "is not two nodes", ""},
		{"nodes of numbers", one(`{ ref = "R1", value = "1", between = [1, 2] }`), 3, "is not two nodes", ""},
		{"same node", one(`{ ref = "R1", value = "1", between = ["mid", "mid"] }`), 3, "to itself", ""},
		{"node misspelt", one(`{ ref = "R1", value = "1", between = ["in.hto", "mid"] }`), 3, `"in.hto" is no node`, "did you mean in.hot?"},
		{"node in the wrong case", one(`{ ref = "R1", value = "1", between = ["mid", "Screen"] }`), 3, `"Screen" is no node`, "did you mean screen?"},
		{"node of odd letters", one(`{ ref = "R1", value = "1", between = ["mid", "a b\u0007"] }`), 3, "is no node", "plain letters"},
		{"part a text", one(`"R1"`), 3, "part 1 is text, not a part", ""},
		{"parts a text", "network = \"U\"\nparts = \"R1\"\n", 2, "parts is text, not a list", ""},
		{"no parts", "network = \"U\"\n", 1, "no parts", ""},
		{"parts empty", "network = \"U\"\nparts = []\n", 2, "no parts", ""},
		{"too many parts", "network = \"U\"\nparts = [" + strings.Repeat("{},", 65) + "]\n", 2, "has 65 parts", "64"},
		{"a part missing", "network = \"U\"\nparts = [\n{ ref = \"R1\", value = \"1\" },\n{ ref = \"R2\", value = \"1\" },\n]\n", 2, "network U needs R3 (shunt at the output)", `add { ref = "R3"`},
		{"a part too many", soundPad[:len(soundPad)-2] + "{ ref = \"R4\", value = \"1\" },\n]\n", 6, "part R4: network U has no such part", "between"},
		{"a place for its own part", "network = \"L\"\nparts = [\n{ ref = \"R1\", value = \"1\" },\n{ ref = \"R2\",\nvalue = \"1\",\n" + between + " },\n]\n",
			6, "part R2: network L places it itself", "leave between out"},
	})
}

func TestRigFaults(t *testing.T) {
	checkFaults(t, "rig.toml", parseRig, []fault{
		{"unknown key", "[output]\nsource_ohm = 100\n", 2, "unknown key output.source_ohm", "did you mean source_ohms?"},
		{"key of another section", "[input]\nsource_ohms = 100\n", 2, "unknown key input.source_ohms", "under [output]"},
		{"key of two sections", "tolerance = \"1%\"\n", 1, "unknown key tolerance", "under [output] or under [input]"},
		{"key of the other sheet", "network = \"U\"\n", 1, "unknown key network", "pad.toml"},
		{"wrong case", "[input]\ncable_pf = 300\n", 2, "unknown key input.cable_pf", "did you mean cable_pF?"},
		{"temperature in quotes", "temperature_c = \"21\"\n", 1, "temperature_c is text, not a number", "temperature_c = 21"},
		{"temperature in kelvin", "temperature_c = 294\n", 1, "is 294", "Celsius"},
		{"mains 0", "mains_hz = 0\n", 1, "is 0", "50 or 60"},
		{"source negative", "[output]\nsource_ohms = -100\n", 2, "is -100", ""},
		{"load 0", "[input]\nload_ohms = 0\n", 2, "is 0", ""},
		{"load as a code", "[input]\nload_ohms = \"10k\"\n", 2, "is text", "load_ohms = 10000"},
		{"cable infinite", "[input]\ncable_pF = inf\n", 2, "is +Inf", "picofarads"},
		{"tolerance a number", "[input]\ntolerance = 5\n", 2, "input.tolerance is a number", `tolerance = "5%"`},
		{"tolerance a fraction", "[output]\ntolerance = \"0.1\"\n", 2, `output.tolerance: "0.1" is no tolerance`, "%"},
		{"drive", "[output]\ndrive = \"differential\"\n", 2, "is not known", "impedance-balanced"},
		{"doubt negative", "[calibration]\nlinearity_db = -0.01\n", 2, "is -0.01", "0 or more"},
		{"volts 0", "[calibration]\ncalibration_volts = 0\n", 2, "is 0", "volts RMS"},
		{"loaded 0", "[calibration]\nloaded_ohms = 0\n", 2, "is 0", ""},
		{"first of two", "[output]\nsource_ohms = -1\n[input]\nload_ohms = -1\n", 2, "output.source_ohms", ""},
	})
}

// A fault of a key comes before one of the whole, wherever it stands: with parts
// misspelt nobody wants to hear that parts are missing.
func TestFaultOrder(t *testing.T) {
	checkFaults(t, "pad.toml", parsePad, []fault{
		{"key before whole", "network = \"U\"\npart = []\n", 2, "unknown key part", "did you mean parts?"},
		{"line order", "network = \"X\"\n[limits]\ncolour = 1\ndecision = \"none\"\n", 1, "", ""},
	})
}
