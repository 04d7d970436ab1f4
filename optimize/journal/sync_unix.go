//go:build unix

package journal

import (
	"errors"
	"os"
)

// syncDir makes a new name in the folder durable.
func syncDir(dir string) error {
	d, err := os.Open(dir)
	if err != nil {
		return err
	}
	return errors.Join(d.Sync(), d.Close())
}
