package main

import "testing"

func TestMedianAndBenchLines(t *testing.T) {
	if m := median([]float64{5, 1, 9, 2, 3}); m != 3 {
		t.Errorf("the median is %g, want 3", m)
	}
	m := benchLine.FindStringSubmatch("BenchmarkPace/square-disc-2  \t 100\t 41.1 ns/op\t 40.5 cpu-ns")
	if m == nil || m[1] != "Pace/square-disc" {
		t.Errorf("the line is read as %q", m)
	}
}
