package main

import (
	"os"
	"os/exec"
	"path/filepath"
	"strconv"
	"strings"
	"testing"
)

const cluster = "../../testdata/cluster"

// shared is a folder with a table that holds a sweep, and the surroundings in
// which the program is found by its name.
func shared(t *testing.T) (dir string, env []string) {
	t.Helper()
	if _, err := exec.LookPath("sh"); err != nil {
		t.Skip("the files are for machines with a shell")
	}
	dir = t.TempDir()
	disc := saved(t, "l.cavity.json", fine(t, "", "make", "limacon"))
	fine(t, "", "study", disc, "--vary", "eps=0.1:0.4:10", "--readings", "area,perimeter", "--keep", filepath.Join(dir, "disc.cavity.json"), "-o", filepath.Join(dir, "single.csv"))
	return dir, append(os.Environ(), "PATH="+filepath.Dir(built)+string(os.PathListSeparator)+os.Getenv("PATH"))
}

// gathered wants the parts of the folder to come to the single run.
func gathered(t *testing.T, dir string, parts int) {
	t.Helper()
	all, err := filepath.Glob(filepath.Join(dir, "parts", "*.jsonl"))
	if err != nil || len(all) != parts {
		t.Fatalf("%d parts, %v", len(all), err)
	}
	joined := filepath.Join(dir, "joined.csv")
	fine(t, "", append([]string{"gather", "-o", joined}, all...)...)
	if read(t, joined) != read(t, filepath.Join(dir, "single.csv")) {
		t.Error("the parts gather to another result")
	}
}

// TestSlurm runs the script of the job array as Slurm does: once for each task,
// with its number and the size of the array in the surroundings.
func TestSlurm(t *testing.T) {
	dir, env := shared(t)
	script, err := filepath.Abs(filepath.Join(cluster, "study.slurm"))
	if err != nil {
		t.Fatal(err)
	}
	for _, task := range []string{"1", "2", "3"} {
		c := exec.Command("sh", script, "disc.cavity.json", "eps")
		c.Dir, c.Env = dir, append(env, "SLURM_ARRAY_TASK_ID="+task, "SLURM_ARRAY_TASK_COUNT=3", "SLURM_CPUS_PER_TASK=1")
		if out, err := c.CombinedOutput(); err != nil {
			t.Fatalf("task %s: %v, %s", task, err, out)
		}
	}
	gathered(t, dir, 3)
}

// TestIndexedJob runs the shell lines of the Job for each of its indices, with
// the surroundings that the file sets, and twice for one of them, as after an
// eviction.
func TestIndexedJob(t *testing.T) {
	dir, env := shared(t)
	job := read(t, filepath.Join(cluster, "study-job.yaml"))
	_, rest, ok := strings.Cut(job, "            - |\n")
	if !ok {
		t.Fatal("the file has no shell lines")
	}
	var lines []string
	for _, line := range strings.Split(rest, "\n") {
		if !strings.HasPrefix(line, strings.Repeat(" ", 14)) {
			break
		}
		lines = append(lines, line[14:])
	}
	value := func(name string) string {
		_, rest, ok := strings.Cut(job, "- name: "+name)
		_, rest, there := strings.Cut(rest, "value: ")
		if !ok || !there {
			t.Fatalf("%s is not set", name)
		}
		v, _, _ := strings.Cut(rest, "\n")
		return strings.Trim(v, `"`)
	}
	n, err := strconv.Atoi(value("PARTS"))
	if err != nil || !strings.Contains(job, "completions: "+strconv.Itoa(n)+"\n") {
		t.Fatalf("%d parts for another number of completions", n)
	}
	for k := range n + 1 {
		c := exec.Command("sh", "-c", strings.Join(lines, "\n"))
		c.Dir, c.Env = dir, append(env, "JOB_COMPLETION_INDEX="+strconv.Itoa(k%n), "PARTS="+strconv.Itoa(n), "TABLE="+value("TABLE"), "SWEEP=eps")
		if out, err := c.CombinedOutput(); err != nil {
			t.Fatalf("index %d: %v, %s", k%n, err, out)
		}
	}
	gathered(t, dir, n)
}
