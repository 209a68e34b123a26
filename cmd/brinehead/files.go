package main

import (
	"errors"
	"fmt"
	"io/fs"
	"os"
	"path/filepath"

	"brinehead/cmd/brinehead/internal/report"
)

// openFolder opens a folder for reading; the error says in the user's words what is wrong with it.
func openFolder(path string) (fs.FS, error) {
	info, err := os.Stat(path)
	switch {
	case errors.Is(err, fs.ErrNotExist):
		return nil, fmt.Errorf("%s: found no such folder, want a folder of tables", path)
	case err != nil:
		return nil, fmt.Errorf("%s: the folder cannot be read: %w", path, err)
	case !info.IsDir():
		return nil, fmt.Errorf("%s: found a file, want a folder of tables", path)
	}
	return os.DirFS(path), nil
}

// folderName is the last part of a folder's path, also where the path is "." or ends in a separator.
func folderName(path string) string {
	if whole, err := filepath.Abs(path); err == nil {
		path = whole
	}
	return filepath.Base(path)
}

// writeFiles writes files into a folder, which it makes where it is not there. Each is first written beside its place
// and all are then renamed, so that a failure leaves no half file; what stood there before is replaced, but never a
// file of an input folder.
func writeFiles(folder string, files []report.File, inputs ...string) (err error) {
	if err := os.MkdirAll(folder, 0o777); err != nil {
		return fmt.Errorf("%s: the folder cannot be made: %w", folder, err)
	}
	target, err := os.Stat(folder)
	if err != nil {
		return fmt.Errorf("%s: the folder cannot be read: %w", folder, err)
	}
	for _, input := range inputs {
		if info, err := os.Stat(input); input != "" && err == nil && os.SameFile(info, target) {
			return fmt.Errorf("%s: results are not written into a folder of tables; name another folder with --out", folder)
		}
	}
	beside := make([]string, 0, len(files))
	defer func() {
		for _, name := range beside {
			err = errors.Join(err, removeIfThere(name))
		}
	}()
	for _, f := range files {
		name, err := writeBeside(folder, f)
		if name != "" {
			beside = append(beside, name)
		}
		if err != nil {
			return fmt.Errorf("%s: cannot be written: %w", filepath.Join(folder, f.Name), err)
		}
	}
	for i, f := range files {
		if err := os.Rename(beside[i], filepath.Join(folder, f.Name)); err != nil {
			return fmt.Errorf("%s: cannot be written: %w", filepath.Join(folder, f.Name), err)
		}
	}
	return nil
}

// writeBeside writes a file under a name of its own in the folder and returns that name.
func writeBeside(folder string, f report.File) (name string, err error) {
	file, err := os.CreateTemp(folder, ".brinehead-*")
	if err != nil {
		return "", err
	}
	_, err = file.Write(f.Content)
	return file.Name(), errors.Join(err, file.Chmod(0o644), file.Close())
}

func removeIfThere(name string) error {
	if err := os.Remove(name); err != nil && !errors.Is(err, fs.ErrNotExist) {
		return err
	}
	return nil
}
