package main

import (
	"os"
	"path/filepath"
	"strings"
	"testing"
)

func TestBringOutsideItsFolder(t *testing.T) {
	t.Chdir(t.TempDir())
	if err := bring(); err == nil || !strings.Contains(err.Error(), "run it in the folder reports") {
		t.Errorf("got %v, want that it runs in the folder reports", err)
	}
}

func TestBringWithoutNpm(t *testing.T) {
	dir := t.TempDir()
	t.Chdir(dir)
	if err := os.Mkdir(project, 0o755); err != nil {
		t.Fatal(err)
	}
	if err := os.WriteFile(filepath.Join(project, "package-lock.json"), []byte("{}"), 0o600); err != nil {
		t.Fatal(err)
	}
	t.Setenv("PATH", dir)
	if err := bring(); err == nil || !strings.Contains(err.Error(), "npm is not installed") {
		t.Errorf("got %v, want that npm is not installed", err)
	}
}

// A command that fails is shown with what it printed.
func TestRunShowsOutput(t *testing.T) {
	t.Chdir(t.TempDir())
	if err := os.Mkdir(project, 0o755); err != nil {
		t.Fatal(err)
	}
	err := run(t.Context(), "go", "no-such-command")
	if err == nil || !strings.Contains(err.Error(), "go no-such-command") || !strings.Contains(err.Error(), "unknown command") {
		t.Errorf("got %v, want the command and its output", err)
	}
}
