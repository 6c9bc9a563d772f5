package result

// Recorded says where in a ledger the record of an answer stands. The hash of a
// station's newest record is its head: keep it elsewhere, and a chain whose end was
// cut off is found.
type Recorded struct {
	Station  string `json:"station"`
	Sequence int64  `json:"sequence"`
	Hash     string `json:"hash"`
}
