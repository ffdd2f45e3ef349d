package wording

import "testing"

// BenchmarkTables builds what the first conclusion of a process waits for.
func BenchmarkTables(b *testing.B) {
	b.ReportAllocs()
	for b.Loop() {
		newTable(func(e *entry) []string { return e.patterns }, entries, moreEntries)
		newTable(func(e *triggerEntry) []string { return e.patterns }, triggerEntries)
	}
}
