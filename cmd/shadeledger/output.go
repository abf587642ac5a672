package main

import (
	"bytes"
	"errors"
	"fmt"
	"io"
	"io/fs"
	"os"
	"path/filepath"

	"shadeledger/scenarios"
	"shadeledger/scenarios/report"
)

// deliver renders a result and hands it to standard output or to the file of --output, whole or not at all.
func (s *settings) deliver(io streams, p *scenarios.Plan, render func(report.Output) error) error {
	var body, notes bytes.Buffer
	o := report.Output{Out: &body, Notes: &notes, Format: s.format, Units: s.outputUnits(p)}
	if err := render(o); err != nil {
		return err
	}
	if s.output == "" {
		if _, err := io.out.Write(body.Bytes()); err != nil {
			return err
		}
	} else if err := s.writeFile(body.Bytes()); err != nil {
		return err
	}
	_, err := io.err.Write(notes.Bytes())
	return err
}

// checkOutput refuses early what writeFile would refuse after the work.
func (s *settings) checkOutput() error {
	if s.output == "" || s.overwrite {
		return nil
	}
	if _, err := os.Lstat(s.output); err == nil {
		return usagef("%s exists; name another file, or add --overwrite", s.output)
	}
	return nil
}

func (s *settings) writeFile(body []byte) error {
	how := keep
	if s.overwrite {
		how = replace
	}
	if err := writeWhole(s.output, body, how); err != nil {
		if errors.Is(err, fs.ErrExist) {
			return usagef("%s exists; name another file, or add --overwrite", s.output)
		}
		return err
	}
	return nil
}

// existing says what happens to a file that is there.
type existing int

const (
	keep existing = iota
	replace
)

// writeWhole writes a file whole or not at all: a temporary file beside it is synced and then put in its place.
func writeWhole(path string, body []byte, how existing) (err error) {
	t, err := os.CreateTemp(filepath.Dir(path), ".shadeledger-*")
	if err != nil {
		return fmt.Errorf("cannot write %s: %w", path, err)
	}
	defer func() {
		if x := os.Remove(t.Name()); err == nil && !errors.Is(x, fs.ErrNotExist) {
			err = x
		}
	}()
	_, err = io.Copy(t, bytes.NewReader(body))
	err = errors.Join(err, t.Chmod(0o644), t.Sync(), t.Close())
	if err != nil {
		return fmt.Errorf("cannot write %s: %w", path, err)
	}
	if how == replace {
		return os.Rename(t.Name(), path)
	}
	return os.Link(t.Name(), path) // fails where the file exists
}
