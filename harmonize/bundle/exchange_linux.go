package bundle

import (
	"errors"
	"io/fs"
	"os"

	"golang.org/x/sys/unix"
)

// takePlace puts the folder fresh at place. A folder that stood there changes
// places with it in one step and then goes by fresh's name.
func takePlace(fresh, place string) error {
	if _, err := os.Stat(place); errors.Is(err, fs.ErrNotExist) {
		return os.Rename(fresh, place)
	}
	err := unix.Renameat2(unix.AT_FDCWD, fresh, unix.AT_FDCWD, place, unix.RENAME_EXCHANGE)
	if errors.Is(err, unix.EINVAL) || errors.Is(err, unix.ENOSYS) { // a file system without the exchange
		return changePlaces(fresh, place)
	}
	return err
}
