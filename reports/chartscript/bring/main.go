// Command bring fetches the chart script that report pages draw with and the coastline
// of their maps, and puts them where the program embeds them. It is run by go generate in the folder reports.
//
// The script is a convenience: without it the program builds, and its pages ask a
// public address for the script. So a machine without npm, or without a network, is
// told so and the command succeeds; with CI=true it fails.
package main

import (
	"context"
	"errors"
	"fmt"
	"os"
	"os/exec"
	"path/filepath"
	"strings"
	"time"
)

const (
	project = "chartscript" // holds package.json and the lock file
	assets  = "assets"      // what the program embeds
)

// patience is how long npm may take; a registry that answers does it in seconds.
const patience = 5 * time.Minute

func main() {
	if err := bring(); err != nil {
		fmt.Fprintln(os.Stderr, "chart script not brought:", err)
		fmt.Fprintln(os.Stderr, "Reports work without it: their pages then load the script from a public address, their maps have no coastline, and their tables need neither.")
		if os.Getenv("CI") == "true" {
			os.Exit(1)
		}
	}
}

func bring() error {
	if _, err := os.Stat(filepath.Join(project, "package-lock.json")); err != nil {
		return fmt.Errorf("%w; run it in the folder reports, as go generate does", err)
	}
	npm, err := exec.LookPath("npm")
	if err != nil {
		return errors.New("npm is not installed; install Node.js with npm and run go generate ./... again")
	}
	ctx, cancel := context.WithTimeout(context.Background(), patience)
	defer cancel()
	if err := run(ctx, npm, "ci", "--ignore-scripts", "--no-audit", "--no-fund", "--loglevel=error"); err != nil {
		return err
	}
	if err := bundle(ctx); err != nil {
		return err
	}
	if err := licence(); err != nil {
		return err
	}
	return coastline()
}

// run runs a command in the project folder; what it prints is shown if it fails.
func run(ctx context.Context, name string, args ...string) error {
	cmd := exec.CommandContext(ctx, name, args...)
	cmd.Dir = project
	out, err := cmd.CombinedOutput()
	if err != nil {
		return fmt.Errorf("%s %s: %w\n%s", filepath.Base(name), args[0], err, strings.TrimSpace(string(out)))
	}
	return nil
}

const banner = "/*! Apache ECharts 5.6.0, the charts that are used, bundled. Apache License 2.0; with zrender (BSD 3-Clause) and tslib (0BSD). Full texts: chart-licence.txt */"

// bundle writes the script beside its place and moves it there whole.
func bundle(ctx context.Context) error {
	made := filepath.Join("node_modules", "chart.js")
	err := run(ctx, "node", filepath.Join("node_modules", "esbuild", "bin", "esbuild"), "entry.js",
		"--bundle", "--minify", "--charset=utf8", "--format=iife", "--global-name=echarts", "--target=es2019",
		"--legal-comments=none", "--banner:js="+banner, "--log-level=warning", "--outfile="+made)
	if err != nil {
		return err
	}
	return os.Rename(filepath.Join(project, made), filepath.Join(assets, "chart.js"))
}

// licence gathers the licences of what is in the bundle.
func licence() error {
	var all []byte
	for _, f := range []string{"echarts/NOTICE", "echarts/LICENSE", "zrender/LICENSE", "tslib/LICENSE.txt"} {
		text, err := os.ReadFile(filepath.Join(project, "node_modules", filepath.FromSlash(f)))
		if err != nil {
			return err
		}
		all = append(all, "==== "+f+" ====\n\n"+strings.TrimSpace(string(text))+"\n\n"...)
	}
	return os.WriteFile(filepath.Join(assets, "chart-licence.txt"), all, 0o644)
}
