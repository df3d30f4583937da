#!/bin/sh
# Builds echarts.custom.min.js, the chart library that every report carries.
# Needs npm and a network; nothing else in this repository does. The result is
# committed, so run this only to move to another version or to add a chart type:
#
#   reports/assets/build.sh
#
# The output depends only on the versions below and on charts-entry.js.
set -eu

echarts=5.6.0
zrender=5.6.1
tslib=2.3.0
esbuild=0.28.2

here=$(cd "$(dirname "$0")" && pwd)
work=$(mktemp -d)
trap 'rm -rf "$work"' EXIT

cd "$work"
npm init -y >/dev/null
npm install --no-audit --no-fund --silent --save-exact \
	"echarts@$echarts" "zrender@$zrender" "tslib@$tslib" "esbuild@$esbuild"
cp "$here/charts-entry.js" entry.js
banner="/* Apache ECharts $echarts, changed: a custom bundle with fewer chart types, minified. Copyright 2017-2024 The Apache Software Foundation, Apache License 2.0, https://www.apache.org/licenses/LICENSE-2.0. Contains d3 (Copyright 2010-2016 Mike Bostock, BSD-3-Clause), zrender $zrender (Copyright 2017 Baidu Inc., BSD-3-Clause) and tslib $tslib (Copyright Microsoft Corporation, 0BSD). */"
npx esbuild entry.js --bundle --minify --format=iife --target=es2018 --legal-comments=none \
	'--define:process.env.NODE_ENV="production"' "--banner:js=$banner" \
	--outfile="$here/echarts.custom.min.js"
cp node_modules/echarts/LICENSE "$here/LICENSE-echarts"
cp node_modules/echarts/NOTICE "$here/NOTICE-echarts"
cp node_modules/echarts/licenses/LICENSE-d3 "$here/LICENSE-d3"
cp node_modules/zrender/LICENSE "$here/LICENSE-zrender"
cp node_modules/tslib/LICENSE.txt "$here/LICENSE-tslib"
