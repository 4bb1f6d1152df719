//go:build !linux

package bundle

import (
	"errors"
	"io/fs"
	"os"
)

// takePlace puts the folder fresh at place. A folder that stood there is
// renamed to fresh's name.
func takePlace(fresh, place string) error {
	if _, err := os.Stat(place); errors.Is(err, fs.ErrNotExist) {
		return os.Rename(fresh, place)
	}
	return changePlaces(fresh, place)
}
