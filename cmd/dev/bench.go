package main

import (
	"context"
	"encoding/csv"
	"fmt"
	"os"
	"path/filepath"
	"regexp"
	"runtime"
	"slices"
	"strconv"
	"strings"
	"time"
)

// A bout is one table on which our tracer is timed against a C program that
// was written for this table alone.
type bout struct {
	name    string // of the C program in testdata/pace, and of the tracer's benchmark
	bounces int    // of one run
	want    float64
}

var bouts = []bout{
	{"stadium", 4_000_000, 1.0},
	{"limacon", 600_000, 0.5},
	{"square-disc", 6_000_000, 1.0},
	{"posts", 1_000_000, 0.7},
}

const (
	paceFolder = "testdata/pace"
	paceRounds = 5
	// pacePlaces makes a C program note places without arclength.
	pacePlaces = "-DPLACES"
)

// pace builds the C programs and the tracer's benchmarks, runs them in turn and
// prints the medians of the ratios of processor time a bounce: ours to that of
// C. Each C program comes in two builds: one notes both Birkhoff coordinates,
// as the tracer does, the other places without arclength.
func pace(ctx context.Context, s *site, _ []string) error {
	if !s.Has("gcc") {
		return errPassedBy("there is no gcc to build the C programs with")
	}
	dir, err := os.MkdirTemp("", "pace")
	if err != nil {
		return fmt.Errorf("no folder for the programs can be made: %w", err)
	}
	defer os.RemoveAll(dir)
	if err := s.buildPace(ctx, dir); err != nil {
		return err
	}
	table := [][]string{paceHead}
	s.say("   %-12s %10s %10s %10s %8s %8s %8s", "table", "ours", "C, s and p", "C, places", "ratio", "(places)", "aim")
	for _, b := range bouts {
		row, err := s.spar(ctx, dir, b)
		if err != nil {
			return err
		}
		table = append(table, row)
	}
	var gain []float64
	for range paceRounds {
		workers, err := s.paceOf(ctx, dir, "run.test", "-test.bench=^BenchmarkWorkers$", "-test.benchtime=8000000x")
		if err != nil {
			return err
		}
		gain = append(gain, workers["Workers/1"]["ns/op"]/workers["Workers/2"]["ns/op"])
	}
	s.say("   two workers do %.2f times as much as one (aim 1.8; both processors must be free for this)", median(gain))
	today := table[1][0]
	table = append(table, []string{today, "two workers to one", "", "", "", fmt.Sprintf("%.3f", median(gain)), "", "1.8"})
	posts, err := s.paceOf(ctx, dir, "sim.test", "-test.bench=^BenchmarkPosts$", "-test.benchtime=400000x")
	if err != nil {
		return err
	}
	for _, name := range sortedKeys(posts) {
		ns := fmt.Sprintf("%.1f", posts[name]["cpu-ns"])
		s.say("   %-18s %8s ns a bounce", strings.ToLower(name), ns)
		table = append(table, []string{today, strings.ToLower(name), ns, "", "", "", "", ""})
	}
	return s.keepPace(table)
}

var paceHead = []string{"date", "what", "ours ns", "C ns", "C places ns", "ratio", "ratio places", "aim"}

// buildPace builds all that is run.
func (s *site) buildPace(ctx context.Context, dir string) error {
	for _, b := range bouts {
		for _, form := range []string{"", pacePlaces} {
			args := []string{"gcc", "-O3", "-march=native"}
			if form != "" {
				args = append(args, form)
			}
			c := call{args: append(args, "-o", filepath.Join(dir, b.name+form), paceFolder+"/"+b.name+".c", "-lm"), dir: s.root}
			s.say("   %s", c)
			if err := s.Run(ctx, c); err != nil {
				return err
			}
		}
	}
	for _, p := range []string{"sim", "sim/run"} {
		out := filepath.Join(dir, filepath.Base(p)+".test")
		if err := s.goTool(ctx, []string{"CGO_ENABLED=0"}, "test", "-c", "-o", out, "./"+p); err != nil {
			return err
		}
	}
	return nil
}

// spar runs both sides of a bout in turn, and answers its line of the table.
func (s *site) spar(ctx context.Context, dir string, b bout) ([]string, error) {
	var ours, full, places, ratio, ratioPlaces []float64
	for range paceRounds {
		var c [2]float64
		for i, form := range []string{"", pacePlaces} {
			said, err := s.Read(ctx, call{args: []string{filepath.Join(dir, b.name+form), strconv.Itoa(b.bounces), "0.7", "0.3"}, dir: s.root})
			if err == nil {
				_, err = fmt.Sscan(said, &c[i])
			}
			if err != nil {
				return nil, fmt.Errorf("the C program %s failed: %w", b.name, err)
			}
		}
		us, err := s.paceOf(ctx, dir, "sim.test", "-test.bench=^BenchmarkPace$/^"+b.name+"$", fmt.Sprintf("-test.benchtime=%dx", b.bounces))
		if err != nil {
			return nil, err
		}
		t := us["Pace/"+b.name]["cpu-ns"]
		ours, full, places = append(ours, t), append(full, c[0]), append(places, c[1])
		ratio, ratioPlaces = append(ratio, t/c[0]), append(ratioPlaces, t/c[1])
	}
	s.say("   %-12s %7.1f ns %7.1f ns %7.1f ns %8.2f %8.2f %8.2f", b.name, median(ours), median(full), median(places), median(ratio), median(ratioPlaces), b.want)
	line := []string{time.Now().Format(time.DateOnly), b.name}
	for _, v := range [][]float64{ours, full, places, ratio, ratioPlaces} {
		line = append(line, fmt.Sprintf("%.3f", median(v)))
	}
	return append(line, fmt.Sprint(b.want)), nil
}

var benchLine = regexp.MustCompile(`(?m)^Benchmark(\S+?)(?:-\d+)?\s+\d+\s+(.*)$`)

// paceOf runs benchmarks of a test program, and answers what they report by
// name and unit.
func (s *site) paceOf(ctx context.Context, dir, program string, args ...string) (map[string]map[string]float64, error) {
	where := filepath.Join(s.root, "sim")
	if program == "run.test" {
		where = filepath.Join(where, "run")
	}
	said, err := s.Read(ctx, call{args: append([]string{filepath.Join(dir, program), "-test.run=^$"}, args...), dir: where})
	if err != nil {
		return nil, fmt.Errorf("a benchmark failed: %w\n%s", err, said)
	}
	all := map[string]map[string]float64{}
	for _, m := range benchLine.FindAllStringSubmatch(said, -1) {
		units := map[string]float64{}
		words := strings.Fields(m[2])
		for i := 1; i < len(words); i += 2 {
			if v, err := strconv.ParseFloat(words[i-1], 64); err == nil {
				units[words[i]] = v
			}
		}
		all[m[1]] = units
	}
	if len(all) == 0 {
		return nil, fmt.Errorf("the program %s has no such benchmark: %v", program, args)
	}
	return all, nil
}

// keepPace writes the table to this machine's file, over that of an earlier
// run.
func (s *site) keepPace(table [][]string) error {
	name := filepath.Join(s.root, filepath.FromSlash(paceFolder), machineName()+".csv")
	f, err := os.Create(name)
	if err != nil {
		return fmt.Errorf("the figures cannot be kept: %w", err)
	}
	w := csv.NewWriter(f)
	err = w.WriteAll(table)
	if e := f.Close(); err == nil {
		err = e
	}
	if err != nil {
		return fmt.Errorf("the figures cannot be kept in %s: %w", name, err)
	}
	s.say("   kept in %s/%s", paceFolder, filepath.Base(name))
	return nil
}

var notPlain = regexp.MustCompile(`[^a-z0-9]+`)

// machineName is the processor's name, or its kind where there is none to read,
// with the number of processors.
func machineName() string {
	name := runtime.GOARCH
	if b, err := os.ReadFile("/proc/cpuinfo"); err == nil {
		if _, after, ok := strings.Cut(string(b), "model name"); ok {
			line, _, _ := strings.Cut(after, "\n")
			name = strings.TrimLeft(line, "\t :")
		}
	}
	return strings.Trim(notPlain.ReplaceAllString(strings.ToLower(name), "-"), "-") + fmt.Sprintf("-%d", runtime.NumCPU())
}

func median(v []float64) float64 {
	v = slices.Sorted(slices.Values(v))
	return v[len(v)/2]
}

func sortedKeys[V any](m map[string]V) []string {
	keys := make([]string, 0, len(m))
	for k := range m {
		keys = append(keys, k)
	}
	slices.Sort(keys)
	return keys
}
