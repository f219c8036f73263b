//! The report on hand-built answers: what a reader sees, and that programs can read it back.

mod answers_by_hand;

use ampthrift::answers::{Choice, OutputAnswer, Verdict};
use ampthrift::circuit::{LIMITS, LimitLine, TERMS, TermLine};
use ampthrift::quantity::Ppm;
use ampthrift::report::json::{self, CheckJson, ChoiceJson};
use ampthrift::report::{Screen, csv, text};
use answers_by_hand::{checked, family, gap, infeasible, no_common_set, one};
use unicode_width::UnicodeWidthStr;

const fn page(width: usize) -> Screen {
    Screen { width, colour: false }
}

/// All hand-built answers.
fn all() -> [Choice; 5] {
    [one(), family(), gap(), infeasible(), no_common_set()]
}

/// The lines from the first that starts so to the next empty one.
fn block(text: &str, start: &str) -> String {
    let lines = text.lines().skip_while(|line| !line.starts_with(start));
    lines.take_while(|line| !line.is_empty()).map(|line| format!("{line}\n")).collect()
}

/// The chosen design's figures of an output.
fn evaluation_mut(output: &mut OutputAnswer) -> &mut ampthrift::circuit::Evaluation {
    match &mut output.verdict {
        Verdict::Chosen(_, evaluation) => evaluation,
        other => panic!("no design: {other:?}"),
    }
}

#[test]
fn one_output_is_shown_in_full() {
    assert_eq!(
        text::choice(&one(), page(80)),
        r#"optimal: EUR 1121.26 for 1 output, 5 order lines
Borehole string, excitation board

pt100: 1 mA within 400 ppm, 250 built
  reference   MV25-B
  amplifier   QA7-STD
  resistor    TF10-0805-10R (10 Ω) + TF10-0805-2K49 (2.49 kΩ) in series,
              together 2.5 kΩ
  lift        2 × SD1
  adjustment  none

  passes: 312.4 of 400 ppm (worst-case), 21 % to spare

What eats the budget (worst-case; a full bar is the 400 ppm allowed)
                               ppm  share
  reference tempco           105.0   26 %  ████████▍
  reference accuracy         100.0   25 %  ████████
  amplifier offset            40.0   10 %  ███▎
  reference drift             30.0    8 %  ██▍
  resistor tolerance          20.0    5 %  █▋
  resistor tempco             12.9    3 %  █
  reference line regulation    4.5    1 %  ▍
  amplifier bias              <0.1   <1 %  ▏
  total                      312.4   78 %  █████████████████████████·······
  zero: reference hysteresis, resistor mismatch
  reference tempco: box method, read as a slope

How close the limits are (closest first)
                            is      limit  to spare
  temperature           -20 °C  ≥  -40 °C      20 K
  swing low             810 mV  ≥  360 mV    450 mV
  amplifier supply min   4.5 V  ≤  14.5 V      10 V
  reference headroom    13.2 V  ≥   2.8 V    10.4 V
  reference source        1 mA  ≤   10 mA      9 mA

  load: every limit holds from -50 mV to 10.2 V; output resistance 1.25 GΩ

What to order (prices in EUR)
             order code      need   buy    each    cost
  reference  MV25-B           250   250  3.1000  775.00
  amplifier  QA7-STD          250   250  0.6400  160.00
  resistor   TF10-0805-10R    250   250  0.0845   21.13
  resistor   TF10-0805-2K49   250   250  0.0845   21.13
  lift       SD1              500  1000  0.0090    9.00
  More is bought than needed where that costs less, or where the order has a
  smallest size.

What it costs
  parts               986.26
  for 5 order lines    75.00
  placement            60.00
  total EUR          1121.26

proof: optimal; no set of parts that passes costs less than EUR 1121.26

Notes
  - not stated for MV25-B, so not counted: load_regulation
  - not stated for QA7-STD, so not counted: open_loop_gain
  - forbid: OLD-* matches no order code
"#
    );
}

#[test]
fn a_family_starts_with_one_table() {
    assert_eq!(
        block(&text::choice(&family(), page(100)), "  output"),
        r#"  output           current    target  total  spare        R  lift     adjustment
  pt100               1 mA   400 ppm  312.4   21 %   2.5 kΩ  2 × SD1  none
  thermistor@1uA      1 µA  1000 ppm    230   76 %  2.49 MΩ  none     TRIM-1
  thermistor@2uA      2 µA  1000 ppm    230   76 %  1.24 MΩ  none     TRIM-1
  thermistor@10uA    10 µA  1000 ppm    230   76 %   249 kΩ  none     TRIM-1
  totals: worst-case, in ppm
  every design: reference MV25-B, amplifier QA7-STD
"#
    );
}

#[test]
fn a_narrow_page_puts_the_parts_under_the_figures() {
    assert_eq!(
        block(&text::choice(&family(), page(60)), "  output"),
        r#"  output           current    target  total  spare
  pt100               1 mA   400 ppm  312.4   21 %
      R 2.5 kΩ, lift 2 × SD1
  thermistor@1uA      1 µA  1000 ppm    230   76 %
      R 2.49 MΩ, adjustment TRIM-1
  thermistor@2uA      2 µA  1000 ppm    230   76 %
      R 1.24 MΩ, adjustment TRIM-1
  thermistor@10uA    10 µA  1000 ppm    230   76 %
      R 249 kΩ, adjustment TRIM-1
  totals: worst-case, in ppm
  every design: reference MV25-B, amplifier QA7-STD
"#
    );
}

#[test]
fn each_output_of_a_family_is_shown_in_short() {
    assert_eq!(
        block(&text::choice(&family(), page(60)), "thermistor@1uA"),
        r#"thermistor@1uA  230 of 1000 ppm, 100 built
  resistor    TF10-0805-2M49, 2.49 MΩ
  budget      105 ppm  reference tempco     ▉
               75 ppm  resistor tempco      ▋
               50 ppm  adjustment residual  ▍
              and 1 smaller term
  limits      adjustment range 1360 ppm to spare,
              resistor power 50 mW to spare
  load        every limit holds from -50 mV to 10.2 V;
              output resistance not known
"#
    );
}

#[test]
fn a_gap_is_never_called_optimal() {
    let text = text::choice(&gap(), page(80));
    assert_eq!(
        block(&text, "gap"),
        r#"gap: EUR 2719.26 for 4 outputs, 8 order lines; stopped early, at most 1.3 %
  above the cheapest
Borehole string, excitation board
"#
    );
    assert_eq!(
        block(&text, "proof"),
        r#"proof: not finished; no set of parts that passes costs less than EUR 2685.93, so
  this one is at most 1.3 % too dear. A longer time limit may close the gap
"#
    );
    assert!(!text.contains("optimal"));
}

#[test]
fn a_missing_design_is_explained() {
    let text = text::choice(&infeasible(), page(80));
    assert_eq!(
        block(&text, "infeasible"),
        r#"infeasible: 1 of 2 outputs without a design; the rest costs EUR 1121.26,
  5 order lines
Borehole string, excitation board
"#
    );
    assert_eq!(
        block(&text, "thermistor@1uA"),
        r#"thermistor@1uA: no design for 1 µA within 1000 ppm
  best total  4135 ppm, 3135 ppm too much, with MV25-B, QA7-STD, TF10-0805-2M49,
              2.49 MΩ
  removed     3 references by the limit reference headroom
              1 reference by the rule lifecycle
              1 amplifier by the limit swing low
  would help  outputs[1].accuracy 4135.3 ppm instead of 1000 ppm
              or conditions.ambient[1] 31.5 °C instead of 50 °C
"#
    );
    assert_eq!(
        block(&text, "proof"),
        r#"proof: for the outputs that have a design, no set of parts costs less than
  EUR 1121.26
"#
    );
}

#[test]
fn a_missing_common_set_names_the_rules() {
    assert_eq!(
        text::choice(&no_common_set(), page(80)),
        r#"infeasible: every output has a design, but no common set keeps the rules on the
  purchase
Borehole string, excitation board

  output      current    target
  pt100          1 mA   400 ppm
  thermistor    10 µA  1000 ppm

Why no common set
  - purchase.lines_max: 3 allowed, 5 is the smallest that works
  - rules.in_stock: MV25-B has 300 in stock, 350 needed, 50 short
"#
    );
}

#[test]
fn check_shows_what_there_is_and_what_is_wrong() {
    assert_eq!(
        text::check(&checked(), page(80)),
        r#"1 error, 1 doubt: catalogue parts with 12 records in 5 files
1 record has errors and cannot be used

              types  order codes
  reference       6            6
  amplifier       4            4
  resistor        3         1152  and 1 type made to order
  lift            1            1
  adjustment      0            0

parts/references.yaml:12:11: error: MV25, grades[1].tempco: `5 ppm` is a ratio
    hint: write a ratio per kelvin, such as `5 ppm/K`
parts/references.yaml:31:3: doubt: MV50: not checked since 2019-01-01
"#
    );
}

#[test]
fn faults_start_with_their_place() {
    assert_eq!(
        text::faults(&checked().faults, page(80)),
        r#"parts/references.yaml:12:11: error: MV25, grades[1].tempco: `5 ppm` is a ratio
    hint: write a ratio per kelvin, such as `5 ppm/K`
parts/references.yaml:31:3: doubt: MV50: not checked since 2019-01-01
1 error, 1 doubt
"#
    );
}

#[test]
fn json_of_no_common_set() {
    assert_eq!(
        json::text(&ChoiceJson::from(&no_common_set())).unwrap(),
        r#"{
  "format": 1,
  "status": "infeasible",
  "currency": "EUR",
  "total_cost": null,
  "lower_bound": null,
  "outputs": [
    {
      "name": "pt100",
      "current_a": 0.001,
      "target_ppm": 400.0,
      "quantity": 250,
      "feasible": true,
      "design": null,
      "total_ppm": null,
      "method": "worst-case",
      "terms": [],
      "not_stated": [],
      "limits": [],
      "compliance": null
    },
    {
      "name": "thermistor",
      "current_a": 0.00001,
      "target_ppm": 1000.0,
      "quantity": 100,
      "feasible": true,
      "design": null,
      "total_ppm": null,
      "method": "worst-case",
      "terms": [],
      "not_stated": [],
      "limits": [],
      "compliance": null
    }
  ],
  "purchase": null,
  "reasons": [
    {
      "rule": "purchase.lines_max",
      "allowed": 3,
      "needed": 5
    },
    {
      "rule": "rules.in_stock",
      "order_code": "MV25-B",
      "allowed": 300,
      "needed": 350,
      "shortfall": 50
    }
  ],
  "notes": []
}
"#
    );
}

#[test]
fn csv_of_check() {
    assert_eq!(
        csv::check(&checked()).unwrap(),
        r#"section,file,line,column,record,field,message,hint
kind,,,,reference,,"types 6, order codes 6, types made to order 0",
kind,,,,amplifier,,"types 4, order codes 4, types made to order 0",
kind,,,,resistor,,"types 3, order codes 1152, types made to order 1",
kind,,,,lift,,"types 1, order codes 1, types made to order 0",
kind,,,,adjustment,,"types 0, order codes 0, types made to order 0",
error,parts/references.yaml,12,11,MV25,grades[1].tempco,`5 ppm` is a ratio,"write a ratio per kelvin, such as `5 ppm/K`"
doubt,parts/references.yaml,31,3,MV50,,not checked since 2019-01-01,
"#
    );
}

#[test]
fn csv_starts_with_the_result_and_the_purchase() {
    let text = csv::choice(&one()).unwrap();
    let start: String = text.lines().take(16).map(|line| format!("{line}\n")).collect();
    assert_eq!(
        start,
        r#"section,output,item,order_code,quantity,bought,each,cost,value,bound,margin,unit,note
result,,status,,,,,,,,,,optimal
result,,total_cost,,,,,1121.26,,,,EUR,
result,,lower_bound,,,,,1121.26,,,,EUR,
purchase,,reference,MV25-B,250,250,3.10,775.00,,,,EUR,pt100
purchase,,amplifier,QA7-STD,250,250,0.64,160.00,,,,EUR,pt100
purchase,,resistor,TF10-0805-10R,250,250,0.0845,21.13,,,,EUR,pt100
purchase,,resistor,TF10-0805-2K49,250,250,0.0845,21.13,,,,EUR,pt100
purchase,,lift,SD1,500,1000,0.009,9.00,,,,EUR,pt100
cost,,parts,,,,,986.26,,,,EUR,
cost,,lines,,,,,75.00,,,,EUR,
cost,,placement,,,,,60.00,,,,EUR,
cost,,adjustment,,,,,0.00,,,,EUR,
output,pt100,current,,250,,,,0.001,,,A,
output,pt100,total,,,,,,312.402,400,,ppm,worst-case
design,pt100,reference,MV25-B,1,,,,,,,,
"#
    );
}

#[test]
fn json_reads_back_and_knows_its_fields() {
    for choice in all() {
        let written = ChoiceJson::from(&choice);
        let text = json::text(&written).unwrap();
        let back: ChoiceJson = serde_json::from_str(&text).unwrap();
        assert_eq!(back, written);
        assert_eq!(json::text(&back).unwrap(), text);
        let stranger = text.replacen("\"status\"", "\"stranger\": 1, \"status\"", 1);
        assert!(serde_json::from_str::<ChoiceJson>(&stranger).is_err());
    }
    let written = CheckJson::from(&checked());
    let back: CheckJson = serde_json::from_str(&json::text(&written).unwrap()).unwrap();
    assert_eq!(back, written);
}

/// The keys of a JSON text in the order written, each once.
fn keys(text: &str) -> Vec<&str> {
    let mut keys = Vec::new();
    for line in text.lines() {
        let Some((key, _)) = line.trim_start().split_once("\": ") else { continue };
        let key = key.trim_start_matches(['{', '"']);
        if !keys.contains(&key) {
            keys.push(key);
        }
    }
    keys
}

#[test]
fn json_keys_keep_their_order() {
    let text = json::text(&ChoiceJson::from(&one())).unwrap();
    let expected = "format status currency total_cost lower_bound outputs name current_a \
                    target_ppm quantity feasible design arrangement reference amplifier network \
                    connection ohms elements order_code lift count adjustment total_ppm method \
                    terms term ppm note not_stated field limits limit value bound margin unit \
                    compliance load_min_v load_max_v output_ohms purchase lines needed bought \
                    each cost parts_cost lines_cost placement_cost adjustment_cost notes";
    assert_eq!(keys(&text), expected.split_whitespace().collect::<Vec<_>>());
}

#[test]
fn json_gives_reasons_for_a_missing_design() {
    let text = json::text(&ChoiceJson::from(&infeasible())).unwrap();
    let value: serde_json::Value = serde_json::from_str(&text).unwrap();
    let output = &value["outputs"][1];
    assert_eq!(output["feasible"], false);
    assert!(output["design"].is_null());
    let reasons = &output["reasons"];
    assert_eq!(
        reasons["removed"],
        serde_json::json!([
            {"kind": "reference", "limit": "reference_headroom", "offers": 3},
            {"kind": "reference", "rule": "lifecycle", "offers": 1},
            {"kind": "amplifier", "limit": "swing_low", "offers": 1},
        ])
    );
    assert_eq!(reasons["best_ppm"], 4135.25);
    assert_eq!(reasons["best_design"]["network"]["connection"], "single");
    assert_eq!(reasons["relaxations"][0]["to"], 4135.25);
    assert!(value["outputs"][0].get("reasons").is_none());
    assert!(value.get("reasons").is_none());
}

#[test]
fn a_figure_that_is_no_number_is_never_written() {
    let mut choice = one();
    for figure in [f64::NAN, f64::INFINITY] {
        evaluation_mut(&mut choice.outputs[0]).terms[0].ppm = Ppm::new(figure);
        assert!(json::text(&ChoiceJson::from(&choice)).is_err());
        assert!(csv::choice(&choice).is_err());
    }
}

#[test]
fn no_line_is_too_wide_and_no_order_code_is_broken() {
    for choice in all() {
        for width in 40..=132 {
            let text = text::choice(&choice, page(width));
            for line in text.lines() {
                assert!(line.width() <= width, "{width}: {line:?}");
                assert_eq!(line, line.trim_end());
            }
            for line in choice.purchase.iter().flat_map(|bill| &bill.lines) {
                assert!(text.contains(&line.order_code), "{width}: {}", line.order_code);
            }
        }
    }
}

#[test]
fn a_long_order_code_stays_whole() {
    let long = "TF10-0805-B-TAPE-AND-REEL-OF-FIVE-THOUSAND-PIECES-2K49";
    let mut choice = one();
    choice.purchase.as_mut().unwrap().lines[3].order_code = long.to_owned();
    if let Verdict::Chosen(design, _) = &mut choice.outputs[0].verdict {
        design.elements[1].order_code = long.to_owned();
    }
    for width in [40, 60, 80] {
        assert_eq!(text::choice(&choice, page(width)).matches(long).count(), 2, "{width}");
    }
}

#[test]
fn every_term_and_limit_is_shown_in_every_format() {
    let mut choice = one();
    let evaluation = evaluation_mut(&mut choice.outputs[0]);
    evaluation.terms = TERMS
        .iter()
        .enumerate()
        .map(|(place, term)| TermLine { term: term.id, ppm: Ppm::new(place as f64), note: None })
        .collect();
    evaluation.limits = LIMITS
        .iter()
        .map(|limit| LimitLine { limit: limit.id, value: 1.0, bound: 2.0, margin: 1.0 })
        .collect();
    let plain = text::choice(&choice, page(100));
    let json = json::text(&ChoiceJson::from(&choice)).unwrap();
    let csv = csv::choice(&choice).unwrap();
    let names = TERMS.iter().map(|term| term.name).chain(LIMITS.iter().map(|limit| limit.name));
    for name in names {
        assert!(plain.contains(&name.replace('_', " ")), "{name} in the text");
        assert!(json.contains(&format!("\"{name}\"")), "{name} in the JSON");
        assert!(csv.contains(&format!(",{name},")), "{name} in the CSV");
    }
}

#[test]
fn colour_changes_nothing_but_colour() {
    for choice in all() {
        let plain = text::choice(&choice, page(80));
        let coloured = text::choice(&choice, Screen { width: 80, colour: true });
        assert!(!plain.contains('\u{1b}'));
        assert!(coloured.contains('\u{1b}'));
        let mut stripped = String::new();
        let mut rest = coloured.as_str();
        while let Some((before, after)) = rest.split_once('\u{1b}') {
            stripped.push_str(before);
            rest = after.split_once('m').unwrap().1;
        }
        stripped.push_str(rest);
        assert_eq!(stripped, plain);
    }
}

#[test]
fn texts_of_the_user_cannot_command_a_terminal_or_a_spreadsheet() {
    let mut choice = one();
    choice.outputs[0].name = "=HYPERLINK(\"x\")".to_owned();
    choice.title = Some("\u{1b}[2Jgone".to_owned());
    choice.notes = vec!["two\nlines".to_owned()];
    let text = text::choice(&choice, page(80));
    assert!(!text.contains('\u{1b}'));
    assert!(!text.contains("two\nlines"));
    let csv = csv::choice(&choice).unwrap();
    assert!(csv_rows(&csv).iter().any(|row| row[1] == "'=HYPERLINK(\"x\")"));
}

#[test]
fn csv_is_one_flat_table() {
    for choice in all() {
        let text = csv::choice(&choice).unwrap();
        let header = text.lines().next().unwrap().split(',').count();
        assert_eq!(header, 13);
        let rows: Vec<Vec<String>> = csv_rows(&text);
        assert!(rows.iter().all(|row| row.len() == header));
        let purchased = rows.iter().filter(|row| row[0] == "purchase").count();
        assert_eq!(purchased, choice.purchase.as_ref().map_or(0, |bill| bill.lines.len()));
        let outputs = rows.iter().filter(|row| row[0] == "output" && row[2] == "total").count();
        assert_eq!(outputs, choice.outputs.len());
    }
}

/// The rows behind the header, read by a CSV reader.
fn csv_rows(text: &str) -> Vec<Vec<String>> {
    let mut reader = ::csv::Reader::from_reader(text.as_bytes());
    let rows = reader.records().map(|row| row.unwrap().iter().map(str::to_owned).collect());
    rows.collect()
}

#[test]
fn a_danger_to_life_stands_out() {
    let mut choice = one();
    choice.notes = vec!["Danger: the supply spans 130 V.".to_owned()];
    let text = text::choice(&choice, Screen { width: 80, colour: true });
    assert!(text.contains("\u{1b}[1;31m- Danger: \u{1b}[0mthe supply"));
}
