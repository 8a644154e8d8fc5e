// Package pass finds the passes of a spacecraft over a site.
package pass
