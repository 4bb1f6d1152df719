package bundle_test

import (
	"bytes"
	"context"
	"crypto/sha256"
	"encoding/csv"
	"errors"
	"fmt"
	"os"
	"path/filepath"
	"strings"
	"testing"

	"platemeld/harmonize"
	"platemeld/harmonize/bundle"
	"platemeld/harmonize/plan"
)

// smallSeries merges the invented tables that the command's tests use.
func smallSeries(t *testing.T) *harmonize.Series {
	t.Helper()
	p, err := plan.Load("../../cmd/platemeld/testdata/small/plan.toml")
	if err != nil {
		t.Fatal(err)
	}
	series, err := harmonize.Merge(context.Background(), p, nil)
	if err != nil {
		t.Fatal(err)
	}
	return series
}

func readFolder(t *testing.T, folder string) map[string][]byte {
	t.Helper()
	content := map[string][]byte{}
	entries, err := os.ReadDir(folder)
	if err != nil {
		t.Fatal(err)
	}
	for _, entry := range entries {
		if content[entry.Name()], err = os.ReadFile(filepath.Join(folder, entry.Name())); err != nil {
			t.Fatal(err)
		}
	}
	return content
}

// TestWrite: every file is in the list of checksums, every table is
// rectangular, the series and the set-aside rows make up the ledger, and a
// second writing gives the same bytes.
func TestWrite(t *testing.T) {
	series := smallSeries(t)
	folder := filepath.Join(t.TempDir(), "results")
	for range 2 { // the second time over the first
		if err := bundle.Write(folder, series); err != nil {
			t.Fatal(err)
		}
	}
	content := readFolder(t, folder)
	sums := string(content["SHA256SUMS"])
	rows := map[string]int{}
	for name, text := range content {
		if name == "SHA256SUMS" {
			continue
		}
		if line := fmt.Sprintf("%x  %s\n", sha256.Sum256(text), name); !strings.Contains(sums, line) {
			t.Errorf("SHA256SUMS lacks %q", line)
		}
		if strings.HasSuffix(name, ".csv") {
			records, err := csv.NewReader(bytes.NewReader(text)).ReadAll()
			if err != nil {
				t.Errorf("%s: %v", name, err)
			}
			rows[name] = len(records) - 1
		}
	}
	if rows["merged.csv"]+rows["set_aside.csv"] != rows["ledger.csv"] || rows["ledger.csv"] != len(series.Measurements) {
		t.Errorf("%d rows merged, %d set aside, %d in the ledger, %d read", rows["merged.csv"], rows["set_aside.csv"], rows["ledger.csv"], len(series.Measurements))
	}
	if n := rows["zeropoints.csv"]; n != 2 || rows["zeropoints_covariance.csv"] != n {
		t.Errorf("%d zero points, %d rows of covariance", n, rows["zeropoints_covariance.csv"])
	}
	again := filepath.Join(t.TempDir(), "again")
	if err := bundle.Write(again, smallSeries(t)); err != nil {
		t.Fatal(err)
	}
	for name, text := range readFolder(t, again) {
		if !bytes.Equal(text, content[name]) {
			t.Errorf("%s differs between two merges of the same input", name)
		}
	}
	for i, line := range strings.Split(string(content["summary.txt"]), "\n") {
		if n := len([]rune(line)); n > 80 {
			t.Errorf("line %d of the summary has %d characters: %s", i+1, n, line)
		}
	}
}

// TestWriteRefuses: what is not a bundle is left as it is, and nothing
// unfinished remains beside it.
func TestWriteRefuses(t *testing.T) {
	series := smallSeries(t)
	above := t.TempDir()
	letters := filepath.Join(above, "letters")
	if err := os.Mkdir(letters, 0o755); err != nil {
		t.Fatal(err)
	}
	if err := os.WriteFile(filepath.Join(letters, "a.txt"), []byte("dear"), 0o644); err != nil {
		t.Fatal(err)
	}
	if err := bundle.Write(letters, series); !errors.Is(err, bundle.ErrNotABundle) {
		t.Errorf("writing over a folder of letters: got %v, want ErrNotABundle", err)
	}
	if err := bundle.Write(filepath.Join(letters, "a.txt"), series); !errors.Is(err, bundle.ErrNotABundle) {
		t.Errorf("writing over a file: got %v, want ErrNotABundle", err)
	}
	if err := bundle.Write(filepath.Join(above, "no", "such", "folder"), series); err == nil {
		t.Error("writing into a folder that does not exist: got no error")
	}
	entries, err := os.ReadDir(above)
	if err != nil || len(entries) != 1 {
		t.Errorf("left behind: %v, %v", entries, err)
	}
	if text, err := os.ReadFile(filepath.Join(letters, "a.txt")); err != nil || string(text) != "dear" {
		t.Errorf("the letter reads %q, %v", text, err)
	}
}

// TestReadmeShowsTheDemo: the summary in the README is the one printed now.
func TestReadmeShowsTheDemo(t *testing.T) {
	readme, err := os.ReadFile("../../README.md")
	if err != nil {
		t.Fatal(err)
	}
	p, err := plan.Load("../../testdata/demo/plan.toml")
	if err != nil {
		t.Fatal(err)
	}
	series, err := harmonize.Merge(context.Background(), p, nil)
	if err != nil {
		t.Fatal(err)
	}
	results, _, found := strings.Cut(bundle.Summary(series), "NIGHT TEST")
	if !found {
		t.Fatal("the summary says nothing of the night test")
	}
	for _, line := range strings.Split(strings.TrimSpace(results), "\n") {
		if line != "" && !strings.Contains(string(readme), "\n    "+line+"\n") {
			t.Errorf("the README does not show %q", line)
		}
	}
}
