package hazewright

import (
	_ "github.com/chromedp/cdproto/network"
	_ "github.com/chromedp/chromedp"
	_ "github.com/go-echarts/go-echarts/v2/charts"
	_ "github.com/google/go-cmp/cmp"
	_ "github.com/rogpeppe/go-internal/testscript"
	_ "github.com/spf13/cobra"
	_ "github.com/spf13/viper"
	_ "go.yaml.in/yaml/v3"
	_ "golang.org/x/term"
	_ "gonum.org/v1/gonum/integrate/quad"
	_ "gonum.org/v1/gonum/interp"
	_ "gonum.org/v1/gonum/mathext"
	_ "gonum.org/v1/gonum/optimize"
	_ "gonum.org/v1/gonum/stat"
	_ "pgregory.net/rapid"
)
