package job

import (
	"fmt"
	"maps"
	"os"
	"strings"
	"testing"
	"testing/fstest"
)

// goodJob is the job of testdata/good with some of its tables replaced.
func goodJob(t *testing.T, replaced map[string]string) *Tables {
	t.Helper()
	folder := fstest.MapFS{}
	for _, name := range []string{"points.csv", "runs.csv", "fittings.csv", "pumps.csv", "pump_curves.csv", "conditions.csv"} {
		content, err := os.ReadFile("testdata/good/" + name)
		if err != nil {
			t.Fatal(err)
		}
		folder[name] = &fstest.MapFile{Data: content}
	}
	for name, text := range replaced {
		folder[name] = &fstest.MapFile{Data: []byte(text)}
	}
	tables, err := ReadTables(folder, nil)
	if err != nil {
		t.Fatal(err)
	}
	return tables
}

func worded(changes []Change) string {
	var lines []string
	for _, c := range changes {
		lines = append(lines, fmt.Sprintf("%s | %s | %s | %s | %s | %s", c.File, c.Row, c.Kind, c.Column, c.Before, c.After))
	}
	return strings.Join(lines, "\n")
}

// A job compared with itself has no change, whatever the order of its rows, its units or the case of its names.
func TestNoChange(t *testing.T) {
	tables := map[string]string{
		"runs.csv":     "run,from,to,length [m],bore [mm]\nR1,sea,S,6.5,250\nR2,D,out,30,200\n",
		"fittings.csv": "run,fitting,tag,k\nR1,strainer,STR1,3\nR1,elbow,,0.3\nR1,elbow,,0.4\nR2,elbow,,0.3\n",
		"limits.csv":   "limit,on,value,unit\nminimum flow,P1,100,m3/h\n",
	}
	other := maps.Clone(tables)
	other["runs.csv"] = "run,length [cm],from,to,bore [m]\nr2,3000,D,OUT,0.2\nR1,650,Sea,S,0.25\n"
	other["fittings.csv"] = "run,fitting,tag,k\nR2,elbow,,0.3\nR1,Elbow,,0.3\nR1,elbow,,0.4\nR1,strainer,str1,3\n"
	other["limits.csv"] = "limit,on,value,unit\nminimum flow,P1,1666.6666666666667,l/min\n"
	if got := worded(goodJob(t, tables).Changes(goodJob(t, other))); got != "" {
		t.Errorf("changes where there are none:\n%s", got)
	}
}

// Rows are matched by what they are known by; cells carry the unit they are written with; rows of one side are named.
func TestChanges(t *testing.T) {
	before := map[string]string{
		"runs.csv":       "run,from,to,length [m],bore [mm],material\nR1,sea,S,6.5,250,steel\nR2,D,out,30,200,steel\n",
		"fittings.csv":   "run,fitting,tag,k\nR1,strainer,STR1,3\nR1,elbow,,0.3\nR1,elbow,,0.4\nR2,gate valve,,0.2\nR2,exit,,1\n",
		"conditions.csv": "condition,water,temperature [degC],draught [m],STR1 blockage [%]\nsummer,sea,32,6,\nwinter,sea,5,6,20\n",
		"limits.csv":     "limit,on,value,unit,condition\nminimum flow,P1,100,m3/h,\nNPSH margin,*,1,m,\n",
	}
	after := map[string]string{
		"runs.csv":       "run,from,to,length [m],bore [m],material\nR1,sea,S,6.5,0.206,GRP\nR2,D,out,30,0.2,steel\n",
		"fittings.csv":   "run,fitting,tag,k\nR1,elbow,,0.3\nR1,elbow,,0.5\nR1,strainer,STR1,3\nR2,gate valve,V2,0.2\nR2,mitre,,0.6\n",
		"conditions.csv": "condition,water,temperature [degC],draught [m],STR1 blockage [%],R2 state\nsummer,sea,32,6,30,shut\ndock,sea,15,4,,\n",
		"limits.csv":     "limit,on,value,unit,condition\nminimum flow,P1,30,l/s,\nNPSH margin,*,1,m,\nmaximum flow,P1,400,m3/h,summer\n",
	}
	want := strings.Join([]string{
		"runs.csv | R1 | changed | bore | 250 mm | 0.206 m",
		"runs.csv | R1 | changed | material | steel | GRP",
		"fittings.csv | R1: elbow (no. 2) | changed | k | 0.4 | 0.5",
		"fittings.csv | R2: gate valve | changed | tag |  | V2",
		"fittings.csv | R2: exit | removed |  | run R2, fitting exit, k 1 | ",
		"fittings.csv | R2: mitre | added |  |  | run R2, fitting mitre, k 0.6",
		"conditions.csv | summer | changed | STR1 blockage |  | 30 %",
		"conditions.csv | summer | changed | R2 state |  | shut",
		"conditions.csv | winter | removed |  | condition winter, water sea, temperature 5 degC, draught 6 m, STR1 blockage 20 % | ",
		"conditions.csv | dock | added |  |  | condition dock, water sea, temperature 15 degC, draught 4 m",
		"limits.csv | minimum flow of P1 | changed | value | 100 m3/h | 30 l/s",
		"limits.csv | maximum flow of P1 in summer | added |  |  | limit maximum flow, on P1, value 400 m3/h, condition summer",
	}, "\n")
	if got := worded(goodJob(t, before).Changes(goodJob(t, after))); got != want {
		t.Errorf("got\n%s\nwant\n%s", got, want)
	}
}
