package bundle

import (
	"crypto/sha256"
	"errors"
	"fmt"
	"io/fs"
	"os"
	"path/filepath"
	"strings"

	"platemeld/harmonize"
)

// ErrNotABundle is returned when the bundle's place is taken by something
// that was not written by Write.
var ErrNotABundle = errors.New("bundle: the folder exists and is not a bundle")

// checksumsFile is the list of checksums; a folder that has one is a bundle.
const checksumsFile = "SHA256SUMS"

// file is one file of a bundle.
type file struct {
	name    string
	content []byte
}

// files returns the content of the bundle in the order of the checksum list.
func files(s *harmonize.Series) []file {
	return []file{
		{"ledger.csv", ledger(s)},
		{"merged.csv", merged(s)},
		{"plan.toml", s.Plan.Text},
		{"set_aside.csv", setAside(s)},
		{"summary.txt", []byte(Summary(s))},
		{"zeropoints.csv", zeroPoints(s)},
		{"zeropoints_covariance.csv", covariance(s)},
	}
}

// Write writes the bundle of a series to a folder, replacing the bundle that
// may be there. The folder above it must exist. On an error the old bundle is
// left as it was and nothing new remains.
func Write(folder string, s *harmonize.Series) error {
	folder = filepath.Clean(folder)
	if err := replaceable(folder); err != nil {
		return err
	}
	above, name := filepath.Split(folder)
	if above == "" {
		above = "."
	}
	fresh, err := os.MkdirTemp(above, "."+name+".unfinished-")
	if err != nil {
		return fmt.Errorf("bundle: %w", err)
	}
	defer os.RemoveAll(fresh) // after the change of places: what was there before
	if err := os.Chmod(fresh, 0o755); err != nil {
		return fmt.Errorf("bundle: %w", err)
	}
	if err := writeFiles(fresh, files(s)); err != nil {
		return err
	}
	if err := takePlace(fresh, folder); err != nil {
		return fmt.Errorf("bundle: %w", err)
	}
	return nil
}

// replaceable reports an error unless folder is free or holds a bundle.
func replaceable(folder string) error {
	info, err := os.Stat(folder)
	if errors.Is(err, fs.ErrNotExist) {
		return nil
	}
	if err != nil {
		return fmt.Errorf("bundle: %w", err)
	}
	if !info.IsDir() {
		return fmt.Errorf("%w: %s is a file; name another bundle folder", ErrNotABundle, folder)
	}
	if _, err := os.Stat(filepath.Join(folder, checksumsFile)); err == nil {
		return nil
	}
	entries, err := os.ReadDir(folder)
	if err != nil {
		return fmt.Errorf("bundle: %w", err)
	}
	if len(entries) > 0 {
		return fmt.Errorf("%w: %s has no %s; name another bundle folder", ErrNotABundle, folder, checksumsFile)
	}
	return nil
}

// writeFiles writes the files and their checksums, and has the disk confirm
// each.
func writeFiles(folder string, list []file) error {
	var sums strings.Builder
	for _, f := range list {
		if err := writeFile(filepath.Join(folder, f.name), f.content); err != nil {
			return err
		}
		fmt.Fprintf(&sums, "%x  %s\n", sha256.Sum256(f.content), f.name)
	}
	return writeFile(filepath.Join(folder, checksumsFile), []byte(sums.String()))
}

func writeFile(path string, content []byte) (err error) {
	out, err := os.OpenFile(path, os.O_WRONLY|os.O_CREATE|os.O_EXCL, 0o644)
	if err != nil {
		return fmt.Errorf("bundle: %w", err)
	}
	defer func() {
		if closeErr := out.Close(); err == nil && closeErr != nil {
			err = fmt.Errorf("bundle: %w", closeErr)
		}
	}()
	if _, err := out.Write(content); err != nil {
		return fmt.Errorf("bundle: %w", err)
	}
	if err := out.Sync(); err != nil {
		return fmt.Errorf("bundle: %w", err)
	}
	return nil
}
