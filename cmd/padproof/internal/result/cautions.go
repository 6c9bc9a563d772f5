package result

// OhmCaution is for everyone who is about to put an ohmmeter on a unit.
const OhmCaution = "Power, phantom and signal off, the unit unplugged at both ends"

// Cautions are for everyone who is about to connect or play something.
var Cautions = []string{
	"Loudspeakers and headphones down or off before a signal plays.",
	"Phantom power off while plugging, and never phantom into a line output.",
	"A loudspeaker line or an amplifier's output is not a signal for a pad or an interface.",
	"Never lift a protective earth to cure hum; mains work is for licensed people under local codes.",
}
