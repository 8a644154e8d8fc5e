package cli

import (
	"html/template"

	"slantwise/reports"
)

// Foot is what the numbers of the live page stand on.
func (m *liveModel) Foot() template.HTML { return m.foot }

func liveFoot(p *reportPlan) (template.HTML, error) {
	b := basisOf(p.scenario, p.flown(), reports.CautionPass)
	return reports.FootHTML(&b)
}
