package main

import (
	"errors"
	"fmt"
	"io/fs"
	"os"
	"path/filepath"

	"ratehouse/store/proof"
)

// signingKey reads the key that signs papers, and makes one when there is none. The file is for its
// owner alone: a key that others can read proves nothing.
func signingKey(file string) (proof.Key, error) {
	text, err := os.ReadFile(file)
	if errors.Is(err, fs.ErrNotExist) {
		return makeKey(file)
	}
	if err != nil {
		return proof.Key{}, fmt.Errorf("signing key: %w", err)
	}
	info, err := os.Stat(file)
	if err != nil {
		return proof.Key{}, fmt.Errorf("signing key: %w", err)
	}
	if info.Mode().Perm()&0o077 != 0 {
		return proof.Key{}, fmt.Errorf("signing key %s can be read by others (%s): take it for known, or run chmod 600 on it if you are sure nobody did", file, info.Mode().Perm())
	}
	key, err := proof.ParseKey(text)
	if err != nil {
		return key, fmt.Errorf("signing key %s: %w", file, err)
	}
	return key, nil
}

// makeKey writes a new key beside its place and then links it there, so that a half-written one is
// never taken for a key, and of two programs that start at once both use the same.
func makeKey(file string) (proof.Key, error) {
	key, err := proof.GenerateKey()
	if err != nil {
		return key, err
	}
	dir := filepath.Dir(file)
	if err := os.MkdirAll(dir, 0o711); err != nil {
		return key, fmt.Errorf("signing key: %w", err)
	}
	f, err := os.CreateTemp(dir, ".signing-*") // made with 0600
	if err != nil {
		return key, fmt.Errorf("signing key: %w", err)
	}
	defer os.Remove(f.Name())
	_, err = f.Write(key.PEM())
	if err = errors.Join(err, f.Sync(), f.Close()); err != nil {
		return key, fmt.Errorf("signing key: %w", err)
	}
	if err := os.Link(f.Name(), file); errors.Is(err, fs.ErrExist) {
		return signingKey(file)
	} else if err != nil {
		return key, fmt.Errorf("signing key: %w", err)
	}
	return key, nil
}
