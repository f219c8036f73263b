//! The JSON of `choose`.

use serde::{Deserialize, Serialize};

use super::number::Number;
use crate::answers::{
    Cause, Choice, ChosenDesign, JointReason, OutputAnswer, Reasons, Relaxation, Removed, Verdict,
};
use crate::circuit::{Compliance, Evaluation, LimitLine, NotStated, TermLine};
use crate::purchase::{Bill, BillLine};

/// The word for the one arrangement there is.
const ARRANGEMENT: &str = "floated-reference";

/// The whole answer.
#[derive(Clone, Debug, PartialEq, Serialize, Deserialize)]
#[serde(deny_unknown_fields)]
pub struct ChoiceJson {
    /// Format number.
    pub format: u32,
    /// `optimal`, `gap` or `infeasible`.
    pub status: String,
    /// Currency of all amounts.
    pub currency: String,
    /// Total; `null` when there is no common set.
    pub total_cost: Option<String>,
    /// Proved lower bound; `null` when there is no common set.
    pub lower_bound: Option<String>,
    /// One entry an output, in the request's order.
    pub outputs: Vec<OutputJson>,
    /// The purchase; `null` when there is no common set.
    pub purchase: Option<BillJson>,
    /// Why there is no common set; only then.
    #[serde(default, skip_serializing_if = "Vec::is_empty")]
    pub reasons: Vec<JointReasonJson>,
    /// Remarks and cautions.
    pub notes: Vec<String>,
}

/// One output.
#[derive(Clone, Debug, PartialEq, Serialize, Deserialize)]
#[serde(deny_unknown_fields)]
pub struct OutputJson {
    /// Name.
    pub name: String,
    /// Nominal current in A.
    pub current_a: Number,
    /// Accuracy asked for, in ppm.
    pub target_ppm: Number,
    /// How many are built.
    pub quantity: u64,
    /// Whether a design passes.
    pub feasible: bool,
    /// The design; `null` when there is none or no common set.
    pub design: Option<DesignJson>,
    /// Total error in ppm; `null` without a design.
    pub total_ppm: Option<Number>,
    /// Budget method.
    pub method: String,
    /// The error budget; empty without a design.
    pub terms: Vec<TermJson>,
    /// Figures wanted and not stated.
    pub not_stated: Vec<NotStatedJson>,
    /// The operating window; empty without a design.
    pub limits: Vec<LimitJson>,
    /// What it can drive; `null` without a design.
    pub compliance: Option<ComplianceJson>,
    /// Why there is no design; only then.
    #[serde(default, skip_serializing_if = "Option::is_none")]
    pub reasons: Option<ReasonsJson>,
}

/// A design by its order codes.
#[derive(Clone, Debug, PartialEq, Serialize, Deserialize)]
#[serde(deny_unknown_fields)]
pub struct DesignJson {
    /// The arrangement.
    pub arrangement: String,
    /// Order code.
    pub reference: String,
    /// Order code.
    pub amplifier: String,
    /// The set resistor.
    pub network: NetworkJson,
    /// The lift, or `null`.
    pub lift: Option<LiftJson>,
    /// Order code, or `null`.
    pub adjustment: Option<String>,
}

/// The set resistor as built.
#[derive(Clone, Debug, PartialEq, Serialize, Deserialize)]
#[serde(deny_unknown_fields)]
pub struct NetworkJson {
    /// `single`, `series` or `parallel`.
    pub connection: String,
    /// Nominal value of the whole in Ω.
    pub ohms: Number,
    /// Its elements.
    pub elements: Vec<ElementJson>,
}

/// One resistor of a network.
#[derive(Clone, Debug, PartialEq, Serialize, Deserialize)]
#[serde(deny_unknown_fields)]
pub struct ElementJson {
    /// Order code.
    pub order_code: String,
    /// Nominal value in Ω.
    pub ohms: Number,
}

/// A number of lift diodes.
#[derive(Clone, Debug, PartialEq, Serialize, Deserialize)]
#[serde(deny_unknown_fields)]
pub struct LiftJson {
    /// Order code.
    pub order_code: String,
    /// How many in series.
    pub count: u32,
}

/// One line of the error budget.
#[derive(Clone, Debug, PartialEq, Serialize, Deserialize)]
#[serde(deny_unknown_fields)]
pub struct TermJson {
    /// Name.
    pub term: String,
    /// Size in ppm of the output current.
    pub ppm: Number,
    /// How it was found, where that needs saying.
    #[serde(default, skip_serializing_if = "Option::is_none")]
    pub note: Option<String>,
}

/// A figure that a record lacks.
#[derive(Clone, Debug, PartialEq, Serialize, Deserialize)]
#[serde(deny_unknown_fields)]
pub struct NotStatedJson {
    /// The part.
    pub order_code: String,
    /// The field.
    pub field: String,
}

/// One inequality of the operating window.
#[derive(Clone, Debug, PartialEq, Serialize, Deserialize)]
#[serde(deny_unknown_fields)]
pub struct LimitJson {
    /// Name.
    pub limit: String,
    /// Left side.
    pub value: Number,
    /// Right side.
    pub bound: Number,
    /// How far on the passing side.
    pub margin: Number,
    /// V, A, W, F, degC or ppm.
    pub unit: String,
}

/// What load the design can drive.
#[derive(Clone, Debug, PartialEq, Serialize, Deserialize)]
#[serde(deny_unknown_fields)]
pub struct ComplianceJson {
    /// Lowest load voltage in V.
    pub load_min_v: Number,
    /// Highest load voltage in V.
    pub load_max_v: Number,
    /// Output resistance in Ω; `null` when nothing that lowers it is stated.
    pub output_ohms: Option<Number>,
}

/// The purchase list.
#[derive(Clone, Debug, PartialEq, Serialize, Deserialize)]
#[serde(deny_unknown_fields)]
pub struct BillJson {
    /// Order lines.
    pub lines: Vec<BillLineJson>,
    /// Sum of the lines.
    pub parts_cost: String,
    /// Cost of having lines.
    pub lines_cost: String,
    /// Cost of placing components.
    pub placement_cost: String,
    /// Cost of adjustment steps.
    pub adjustment_cost: String,
}

/// One order line.
#[derive(Clone, Debug, PartialEq, Serialize, Deserialize)]
#[serde(deny_unknown_fields)]
pub struct BillLineJson {
    /// What is ordered.
    pub order_code: String,
    /// Units that the outputs need.
    pub needed: u64,
    /// Units bought.
    pub bought: u64,
    /// Unit price.
    pub each: String,
    /// Cost of the line.
    pub cost: String,
}

/// Why an output has no design.
#[derive(Clone, Debug, PartialEq, Serialize, Deserialize)]
#[serde(deny_unknown_fields)]
pub struct ReasonsJson {
    /// Offers that fell out.
    pub removed: Vec<RemovedJson>,
    /// The smallest total within the window in ppm; `null` when nothing fits the window.
    pub best_ppm: Option<Number>,
    /// The design that reaches it.
    pub best_design: Option<DesignJson>,
    /// Changes of one figure that would help.
    pub relaxations: Vec<RelaxationJson>,
}

/// Offers of one kind that fell out for one cause. Either `limit` or `rule` is there.
#[derive(Clone, Debug, PartialEq, Serialize, Deserialize)]
#[serde(deny_unknown_fields)]
pub struct RemovedJson {
    /// Kind of part.
    pub kind: String,
    /// The limit of the operating window.
    #[serde(default, skip_serializing_if = "Option::is_none")]
    pub limit: Option<String>,
    /// The rule of the request.
    #[serde(default, skip_serializing_if = "Option::is_none")]
    pub rule: Option<String>,
    /// How many.
    pub offers: u64,
}

/// A change of one figure of the request.
#[derive(Clone, Debug, PartialEq, Serialize, Deserialize)]
#[serde(deny_unknown_fields)]
pub struct RelaxationJson {
    /// Its path in the request.
    pub figure: String,
    /// What it is.
    pub from: Number,
    /// What would do.
    pub to: Number,
}

/// A rule on the whole purchase that no common set keeps.
#[derive(Clone, Debug, PartialEq, Serialize, Deserialize)]
#[serde(deny_unknown_fields)]
pub struct JointReasonJson {
    /// The rule.
    pub rule: String,
    /// The order code that is short, for stock.
    #[serde(default, skip_serializing_if = "Option::is_none")]
    pub order_code: Option<String>,
    /// What is allowed or in stock.
    pub allowed: u64,
    /// The smallest value that works.
    pub needed: u64,
    /// How many are short, for stock.
    #[serde(default, skip_serializing_if = "Option::is_none")]
    pub shortfall: Option<u64>,
}

impl From<&Choice> for ChoiceJson {
    fn from(choice: &Choice) -> Self {
        Self {
            format: super::FORMAT,
            status: choice.status.word().to_owned(),
            currency: choice.currency.clone(),
            total_cost: choice.totals.map(|(total, _)| total.to_string()),
            lower_bound: choice.totals.map(|(_, bound)| bound.to_string()),
            outputs: choice.outputs.iter().map(Into::into).collect(),
            purchase: choice.purchase.as_ref().map(Into::into),
            reasons: choice.joint_reasons.iter().map(Into::into).collect(),
            notes: choice.notes.clone(),
        }
    }
}

impl From<&OutputAnswer> for OutputJson {
    fn from(output: &OutputAnswer) -> Self {
        let mut json = Self {
            name: output.name.clone(),
            current_a: Number::new(output.current.value()),
            target_ppm: Number::new(output.target.value()),
            quantity: output.quantity,
            feasible: true,
            design: None,
            total_ppm: None,
            method: output.method.to_owned(),
            terms: Vec::new(),
            not_stated: Vec::new(),
            limits: Vec::new(),
            compliance: None,
            reasons: None,
        };
        match &output.verdict {
            Verdict::Chosen(design, evaluation) => json.add_design(design, evaluation),
            Verdict::NoCommonSet => {}
            Verdict::Infeasible(reasons) => {
                json.feasible = false;
                json.reasons = Some(reasons.into());
            }
        }
        json
    }
}

impl OutputJson {
    fn add_design(&mut self, design: &ChosenDesign, evaluation: &Evaluation) {
        self.design = Some(design.into());
        self.total_ppm = Some(Number::new(evaluation.total.value()));
        self.terms = evaluation.terms.iter().map(Into::into).collect();
        self.not_stated = evaluation.not_stated.iter().map(Into::into).collect();
        self.limits = evaluation.limits.iter().map(Into::into).collect();
        self.compliance = Some((&evaluation.compliance).into());
    }
}

impl From<&ChosenDesign> for DesignJson {
    fn from(design: &ChosenDesign) -> Self {
        let element = |element: &crate::answers::ChosenElement| ElementJson {
            order_code: element.order_code.clone(),
            ohms: Number::new(element.ohms.value()),
        };
        Self {
            arrangement: ARRANGEMENT.to_owned(),
            reference: design.reference.clone(),
            amplifier: design.amplifier.clone(),
            network: NetworkJson {
                connection: design.connection.word().to_owned(),
                ohms: Number::new(design.ohms.value()),
                elements: design.elements.iter().map(element).collect(),
            },
            lift: design
                .lift
                .as_ref()
                .map(|(code, count)| LiftJson { order_code: code.clone(), count: *count }),
            adjustment: design.adjustment.clone(),
        }
    }
}

impl From<&TermLine> for TermJson {
    fn from(line: &TermLine) -> Self {
        Self {
            term: line.term.def().name.to_owned(),
            ppm: Number::new(line.ppm.value()),
            note: line.note.clone(),
        }
    }
}

impl From<&NotStated> for NotStatedJson {
    fn from(figure: &NotStated) -> Self {
        Self { order_code: figure.order_code.clone(), field: figure.field.to_owned() }
    }
}

impl From<&LimitLine> for LimitJson {
    fn from(line: &LimitLine) -> Self {
        let definition = line.limit.def();
        Self {
            limit: definition.name.to_owned(),
            value: Number::new(line.value),
            bound: Number::new(line.bound),
            margin: Number::new(line.margin),
            unit: definition.unit.to_owned(),
        }
    }
}

impl From<&Compliance> for ComplianceJson {
    fn from(compliance: &Compliance) -> Self {
        Self {
            load_min_v: Number::new(compliance.load_min.value()),
            load_max_v: Number::new(compliance.load_max.value()),
            output_ohms: compliance.output.map(|ohms| Number::new(ohms.value())),
        }
    }
}

impl From<&Bill> for BillJson {
    fn from(bill: &Bill) -> Self {
        Self {
            lines: bill.lines.iter().map(Into::into).collect(),
            parts_cost: bill.parts_cost.to_string(),
            lines_cost: bill.lines_cost.to_string(),
            placement_cost: bill.placement_cost.to_string(),
            adjustment_cost: bill.adjustment_cost.to_string(),
        }
    }
}

impl From<&BillLine> for BillLineJson {
    fn from(line: &BillLine) -> Self {
        Self {
            order_code: line.order_code.clone(),
            needed: line.needed,
            bought: line.bought,
            each: line.each.to_string(),
            cost: line.cost.to_string(),
        }
    }
}

impl From<&Reasons> for ReasonsJson {
    fn from(reasons: &Reasons) -> Self {
        Self {
            removed: reasons.removed.iter().map(Into::into).collect(),
            best_ppm: reasons.best.as_ref().map(|(total, _)| Number::new(total.value())),
            best_design: reasons.best.as_ref().map(|(_, design)| design.into()),
            relaxations: reasons.relaxations.iter().map(Into::into).collect(),
        }
    }
}

impl From<&Removed> for RemovedJson {
    fn from(removed: &Removed) -> Self {
        let (limit, rule) = match removed.cause {
            Cause::Limit(limit) => (Some(limit.def().name.to_owned()), None),
            Cause::Rule(rule) => (None, Some(rule.to_owned())),
        };
        Self { kind: removed.kind.word().to_owned(), limit, rule, offers: removed.offers }
    }
}

impl From<&Relaxation> for RelaxationJson {
    fn from(change: &Relaxation) -> Self {
        Self {
            figure: change.figure.clone(),
            from: Number::new(change.from),
            to: Number::new(change.to),
        }
    }
}

impl From<&JointReason> for JointReasonJson {
    fn from(reason: &JointReason) -> Self {
        Self {
            rule: reason.rule.to_owned(),
            order_code: reason.order_code.clone(),
            allowed: reason.allowed,
            needed: reason.needed,
            shortfall: reason
                .order_code
                .as_ref()
                .map(|_| reason.needed.saturating_sub(reason.allowed)),
        }
    }
}
