package render

import (
	"steelyard/compute/result"
	"steelyard/render/page"
)

func (c *composer) beam(h *result.Hypothesis) *page.Figure                       { return nil }
func (c *composer) beamFull(h *result.Hypothesis) *page.Figure                   { return nil }
func (c *composer) curveFigure(h *result.Hypothesis) *page.Figure                { return nil }
func (c *composer) sharedBeams()                                                 {}
func (c *composer) survivalFigure(s *result.Study) *page.Figure                  { return nil }
func (c *composer) marginFigure(v voice, s *result.Sensitivity) *page.Figure     { return nil }
func (c *composer) studiesFigure(g []*result.Pooled) *page.Figure                { return nil }
func (c *composer) cumulativeFigure(p *result.Pooled) *page.Figure               { return nil }
func (c *composer) tallyFigure(name string, t *result.Tally) *page.Figure        { return nil }
func (c *composer) beliefFigure(p *result.Prior, o *result.Outcome) *page.Figure { return nil }
func (c *composer) timelineFigure() *page.Figure                                 { return nil }
