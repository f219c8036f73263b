//! The flags that stand for a request of one output: their names, examples and help come from the
//! table of the request.

use clap::{Arg, ArgMatches, Args, Command, FromArgMatches};

use crate::request::fields::FieldForm;
use crate::request::{FlagDef, request_flags};

/// The flags given, by name without dashes, with their texts.
#[derive(Clone, Debug, Default, PartialEq, Eq)]
pub(super) struct RequestFlags(Vec<(String, String)>);

impl RequestFlags {
    /// Whether none was given.
    pub(super) const fn is_empty(&self) -> bool {
        self.0.is_empty()
    }

    /// Name and text of each flag given.
    pub(super) fn pairs(&self) -> &[(String, String)] {
        &self.0
    }
}

/// The identity of the argument that the flags exclude: the request file.
pub(super) const FILE: &str = "request";

fn argument(flag: &FlagDef) -> Arg {
    let field = flag.field;
    let default = field.default.map_or(String::new(), |text| format!(" [default: {text}]"));
    let argument = Arg::new(flag.name)
        .long(flag.name)
        .value_name(flag.example)
        .help(format!("{}{default}", field.doc))
        .help_heading("One output without a request file")
        .conflicts_with(FILE);
    match field.form {
        // The flag alone means yes.
        FieldForm::Switch => argument.num_args(0..=1).default_missing_value("true"),
        // A figure can start with a minus.
        FieldForm::Range(_) | FieldForm::Load | FieldForm::LoadPoint | FieldForm::Figure(_) => {
            argument.allow_hyphen_values(true)
        }
        _ => argument,
    }
}

impl Args for RequestFlags {
    fn augment_args(command: Command) -> Command {
        command.args(request_flags().iter().map(argument))
    }

    fn augment_args_for_update(command: Command) -> Command {
        Self::augment_args(command)
    }
}

impl FromArgMatches for RequestFlags {
    fn from_arg_matches(matches: &ArgMatches) -> Result<Self, clap::Error> {
        let flags = request_flags();
        let given = flags.iter().filter_map(|flag| {
            let text = matches.get_one::<String>(flag.name)?;
            Some((flag.name.to_owned(), text.clone()))
        });
        Ok(Self(given.collect()))
    }

    fn update_from_arg_matches(&mut self, matches: &ArgMatches) -> Result<(), clap::Error> {
        *self = Self::from_arg_matches(matches)?;
        Ok(())
    }
}
