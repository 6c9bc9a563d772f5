package ledger

func writeUntilKilled(job string) {}
