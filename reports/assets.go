package reports

import (
	"crypto/sha256"
	"embed"
	"encoding/base64"
	"sync"
)

//go:generate go run ./chartscript/bring

//go:embed all:assets
var assets embed.FS

//go:embed pages/page.css
var sharedStyle string

//go:embed pages/comparison.css
var comparisonStyle string

//go:embed pages/timeline.css
var timelineStyle string

// styleSheet is the style of every page: what all share, then what one kind of page has of
// its own, each rule of that under the class of its body.
var styleSheet = sharedStyle + timelineStyle + comparisonStyle

//go:embed pages/charts.js
var chartsCode string

//go:embed pages/table.js
var tableCode string

// pageScript is the script that every page has, under the name page.js.
var pageScript = chartsCode + tableCode

// Where a page finds the chart script when none is embedded: the whole of Apache
// ECharts 5.6.0 at a public host. The hash is of dist/echarts.min.js in the npm
// package of that version (TestIntegrityOfPublicScript).
const (
	publicScript = "https://cdn.jsdelivr.net/npm/echarts@5.6.0/dist/echarts.min.js"
	publicOrigin = "https://cdn.jsdelivr.net"
	publicHash   = "sha384-pPi0zxBAoDu6+JXW/C68UZLvBUUtU+7zonhif43rqj7pxsGyqyqzcian2Rj37Rss"
)

// chartScript returns the embedded chart script and its licences, empty where
// go generate has not brought them.
var chartScript = sync.OnceValue(func() script {
	code, err := assets.ReadFile("assets/chart.js")
	if err != nil {
		return script{}
	}
	licence, err := assets.ReadFile("assets/chart-licence.txt")
	if err != nil {
		return script{} // never hand the script on without its licence
	}
	return script{code: string(code), licence: string(licence)}
})

type script struct{ code, licence string }

// contentHash returns the source expression of a Content-Security-Policy that lets
// exactly this inline script run.
func contentHash(code string) string {
	sum := sha256.Sum256([]byte(code))
	return "'sha256-" + base64.StdEncoding.EncodeToString(sum[:]) + "'"
}

// StyleSheet returns the style sheet of all pages, for a page that is made elsewhere.
func StyleSheet() string { return styleSheet }
