package store

import (
	"testing"
)

// Benchmarks with 200,000 results, the size that the promises are for:
//
//	go test -bench Large -benchtime 20x ./store
func BenchmarkLarge(b *testing.B) {
	const results, batch = 200_000, 5_000
	dir := b.TempDir()
	s, e := practice(b, dir, Options{})
	for n := 0; n < results; n += batch {
		var all []Complete
		for i := range batch {
			all = append(all, Complete{Answers: nth(e, n+i)})
		}
		must(s.KeepResults(b.Context(), all))
	}
	s.branch.Close()

	b.Run("open and sign in", func(b *testing.B) {
		for b.Loop() {
			branch := must(Open(b.Context(), dir, Options{}))
			must(branch.SignInPractice(b.Context()))
			branch.Close()
		}
	})
	b.Run("first page after opening", func(b *testing.B) {
		for b.Loop() {
			b.StopTimer()
			s := openPractice(b, dir, Options{})
			b.StartTimer()
			must(s.Results(b.Context(), 0, 50))
			b.StopTimer()
			s.branch.Close()
			b.StartTimer()
		}
	})
	s = openPractice(b, dir, Options{})
	must(s.ResultCount(b.Context()))
	b.Run("any page", func(b *testing.B) {
		for i := 0; b.Loop(); i++ {
			must(s.Results(b.Context(), i*104729%results, 50))
		}
	})
	b.Run("one result", func(b *testing.B) {
		for i := 0; b.Loop(); i++ {
			must(s.Result(b.Context(), int64(3+i*104729%results)))
		}
	})
	b.Run("keep", func(b *testing.B) {
		for i := 0; b.Loop(); i++ {
			must(s.KeepResult(b.Context(), Complete{Answers: nth(e, i)}))
		}
	})
	b.Run("prove", func(b *testing.B) {
		for b.Loop() {
			if proof := must(s.Prove(b.Context(), nil)); len(proof.Problems) > 0 {
				b.Fatal(proof.Problems)
			}
		}
	})
}
