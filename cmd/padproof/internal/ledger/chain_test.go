package ledger

import (
	"context"
	"os/exec"
	"strings"
	"testing"
)

// python is an interpreter, or the test is skipped.
func python(t *testing.T) string {
	t.Helper()
	for _, name := range []string{"/usr/bin/python3", "python3"} {
		if path, err := exec.LookPath(name); err == nil {
			return path
		}
	}
	t.Skip("no python3 to verify the chain with")
	return ""
}

// A script that knows only the documented form of a body finds the chain sound,
// with the hashes that the receipts gave, and not sound once a byte is changed.
func TestChainByScript(t *testing.T) {
	ctx := context.Background()
	interpreter, where := python(t), inFile(t)
	l := open(t, where, Options{AllowSimulated: true})
	var want strings.Builder
	for n := 1; n <= 20; n++ {
		r := record("bench <1> \"µ\" & \u2028", n)
		r.Simulated, r.Operator, r.Options = n%2 == 0, "Jo\tO'Neil \xff", map[string]string{"within-db": "0.3", "channel": "2"}
		r.Answer = []byte("{ \"verdict\" : \"PASS\",\n \"text\": \"a <b> & c\u2029\" }")
		receipt, err := l.Append(ctx, r)
		if err != nil {
			t.Fatal(err)
		}
		want.WriteString(receipt.String() + " " + receipt.Hash + "\n")
	}
	said, err := exec.Command(interpreter, "testdata/chain.py", where).CombinedOutput()
	if err != nil || string(said) != want.String() {
		t.Errorf("chain.py says %v\n%s\nwant\n%s", err, said, want.String())
	}
	if v, err := l.Verify(ctx); err != nil || len(v.Faults) > 0 {
		t.Errorf("Verify = %+v, %v, want no faults", v, err)
	}
	unguard(t, l)
	change(t, l, "UPDATE padproof_record SET body = CAST(replace(body, '0.3', '0.4') AS BLOB) WHERE sequence = 7")
	if said, err := exec.Command(interpreter, "testdata/chain.py", where).CombinedOutput(); err == nil || !strings.Contains(string(said), "/7: SHA-256") {
		t.Errorf("chain.py of a changed body says %v %s, want record 7", err, said)
	}
}
