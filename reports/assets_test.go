package reports

import (
	"crypto/sha512"
	"encoding/base64"
	"errors"
	"io/fs"
	"os"
	"strings"
	"testing"
)

// The address of the public script serves the file of the npm package unchanged, so
// the hash on the pages is that file's.
func TestIntegrityOfPublicScript(t *testing.T) {
	code, err := os.ReadFile("chartscript/node_modules/echarts/dist/echarts.min.js")
	if errors.Is(err, fs.ErrNotExist) {
		t.Skip("the chart script was not brought")
	}
	if err != nil {
		t.Fatal(err)
	}
	sum := sha512.Sum384(code)
	if got := "sha384-" + base64.StdEncoding.EncodeToString(sum[:]); got != publicHash {
		t.Errorf("the package's script has %s, the pages ask for %s", got, publicHash)
	}
}

// The lock file pins what is fetched by its hash and leaves the place to the machine.
func TestLockFileHoldsNoAddress(t *testing.T) {
	lock, err := os.ReadFile("chartscript/package-lock.json")
	if err != nil {
		t.Fatal(err)
	}
	for _, bad := range []string{"://", `"resolved"`} {
		if strings.Contains(string(lock), bad) {
			t.Errorf("package-lock.json holds %s; write it with omit-lockfile-registry-resolved", bad)
		}
	}
	if !strings.Contains(string(lock), `"integrity"`) {
		t.Error("package-lock.json holds no hashes")
	}
}

func TestScriptCannotEndItsElement(t *testing.T) {
	for _, code := range []string{pageScript, inlineSafe(chartScript().code), inlineSafe(`a="</script>"; b="<!--"`)} {
		if strings.Contains(code, "</script") || strings.Contains(code, "<!--") {
			t.Error("a script that stands in a page could end its element")
		}
	}
}

func TestEmbeddedScriptComesWithItsLicence(t *testing.T) {
	s := chartScript()
	if s.code == "" {
		t.Skip("the chart script was not brought")
	}
	if !strings.HasPrefix(s.code, "/*! Apache ECharts 5.6.0") || !strings.Contains(s.licence, "Apache License") {
		t.Error("the chart script or its licence file does not say what it is")
	}
}
