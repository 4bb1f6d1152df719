package bundle

import "os"

// changePlaces exchanges two folders by three renames, for file systems that
// cannot do it in one step. When the second fails the first is taken back.
func changePlaces(fresh, place string) error {
	old := fresh + ".old"
	if err := os.Rename(place, old); err != nil {
		return err
	}
	if err := os.Rename(fresh, place); err != nil {
		if back := os.Rename(old, place); back != nil {
			return back
		}
		return err
	}
	return os.Rename(old, fresh)
}
