package result

// A Drawing is the circuit that a sheet draws: enough to draw it again.
type Drawing struct {
	Network    string      `json:"network"`
	Unbalanced bool        `json:"unbalanced"` // in.cold, out.cold and screen are one node
	Parts      []DrawnPart `json:"parts"`
}

// A DrawnPart is one part between two nodes: the pins in.hot, in.cold, out.hot,
// out.cold, screen, or inner ones.
type DrawnPart struct {
	Ref   string `json:"ref"`
	Kind  string `json:"kind"`  // resistor, capacitor or inductor
	Value Number `json:"value"` // ohms, farads or henries
	Code  string `json:"code"`  // the value as IEC 60062 writes it: 4R7, 1k5
	A     string `json:"a"`
	B     string `json:"b"`
}
