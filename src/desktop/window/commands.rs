//! What can be done from anywhere: name, shortcut, and whether it is possible now. Menu, buttons and keys all come from here.

use egui::{Key, KeyboardShortcut, Modifiers};

/// A command.
#[derive(Clone, Copy, PartialEq, Eq, Debug)]
pub enum Command {
    /// Make a new plant folder.
    NewPlant,
    /// Open a plant folder.
    OpenPlant,
    /// Add a press.
    NewPress,
    /// Write what has changed.
    Save,
    /// Take the last change back.
    Undo,
    /// Bring the last undone change back.
    Redo,
    /// Print the record of the shown press.
    PrintRecord,
    /// Show the next press of the list.
    NextPress,
    /// Show the press before.
    PreviousPress,
    /// Put the cursor into the find box.
    Find,
    /// Show a sheet, by place.
    ShowSheet(usize),
}

impl Command {
    /// Every command.
    pub const ALL: &[Self] = &[
        Self::NewPlant,
        Self::OpenPlant,
        Self::NewPress,
        Self::Save,
        Self::Undo,
        Self::Redo,
        Self::PrintRecord,
        Self::NextPress,
        Self::PreviousPress,
        Self::Find,
        Self::ShowSheet(0),
        Self::ShowSheet(1),
        Self::ShowSheet(2),
        Self::ShowSheet(3),
        Self::ShowSheet(4),
        Self::ShowSheet(5),
        Self::ShowSheet(6),
    ];

    /// Its name on buttons and menus.
    pub const fn name(self) -> &'static str {
        match self {
            Self::NewPlant => "New plant…",
            Self::OpenPlant => "Open plant…",
            Self::NewPress => "New press…",
            Self::Save => "Save",
            Self::Undo => "Undo",
            Self::Redo => "Redo",
            Self::PrintRecord => "Print record…",
            Self::NextPress => "Next press",
            Self::PreviousPress => "Previous press",
            Self::Find => "Find a press",
            Self::ShowSheet(_) => "Show sheet",
        }
    }

    /// Its keys. All hold Ctrl (on a Mac, Command), so that no letter typed into a field is ever a command.
    pub const fn shortcut(self) -> KeyboardShortcut {
        const fn keys(key: Key) -> KeyboardShortcut {
            KeyboardShortcut::new(Modifiers::COMMAND, key)
        }
        const fn shifted(key: Key) -> KeyboardShortcut {
            KeyboardShortcut::new(Modifiers::COMMAND.plus(Modifiers::SHIFT), key)
        }
        match self {
            Self::NewPlant => shifted(Key::N),
            Self::OpenPlant => keys(Key::O),
            Self::NewPress => keys(Key::N),
            Self::Save => keys(Key::S),
            Self::Undo => keys(Key::Z),
            Self::Redo => shifted(Key::Z),
            Self::PrintRecord => keys(Key::P),
            Self::NextPress => keys(Key::PageDown),
            Self::PreviousPress => keys(Key::PageUp),
            Self::Find => keys(Key::F),
            Self::ShowSheet(0) => keys(Key::Num1),
            Self::ShowSheet(1) => keys(Key::Num2),
            Self::ShowSheet(2) => keys(Key::Num3),
            Self::ShowSheet(3) => keys(Key::Num4),
            Self::ShowSheet(4) => keys(Key::Num5),
            Self::ShowSheet(5) => keys(Key::Num6),
            Self::ShowSheet(_) => keys(Key::Num7),
        }
    }

    /// Other keys that do the same, for hands that are used to them.
    pub const fn other_shortcut(self) -> Option<KeyboardShortcut> {
        match self {
            Self::Redo => Some(KeyboardShortcut::new(Modifiers::COMMAND, Key::Y)),
            _ => None,
        }
    }

    /// Both kinds of keys.
    fn shortcuts(self) -> impl Iterator<Item = KeyboardShortcut> {
        std::iter::once(self.shortcut()).chain(self.other_shortcut())
    }

    /// Whether the cursor goes back to the field that it stood in.
    pub const fn returns_to_field(self) -> bool {
        matches!(self, Self::Save | Self::Undo | Self::Redo | Self::PrintRecord)
    }

    /// The commands whose keys were pressed in this frame. Longer shortcuts are looked at first, since they hold the shorter.
    ///
    /// Text that is no part of the plant, such as a path, keeps an undo of its own: there Undo and Redo are left to the field.
    pub fn pressed(context: &egui::Context) -> Vec<Self> {
        let is_left_to_field = super::widgets::has_own_undo(context);
        let mut commands: Vec<Self> = Self::ALL.to_vec();
        commands.retain(|command| !(is_left_to_field && matches!(command, Self::Undo | Self::Redo)));
        commands.sort_by_key(|command| std::cmp::Reverse(command.shortcut().modifiers.shift));
        context.input_mut(|input| {
            let mut is_pressed = |command: &Self| command.shortcuts().any(|keys| input.consume_shortcut(&keys));
            commands.into_iter().filter(|command| is_pressed(command)).collect()
        })
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn no_two_commands_share_their_keys_and_none_is_a_plain_letter() {
        let all: Vec<_> = Command::ALL.iter().flat_map(|one| one.shortcuts().map(move |keys| (one, keys))).collect();
        for (index, (one, keys)) in all.iter().enumerate() {
            assert!(keys.modifiers.command, "{one:?}");
            for (other, other_keys) in &all[index + 1..] {
                assert_ne!(keys, other_keys, "{one:?} {other:?}");
            }
        }
    }

    #[test]
    fn text_fields_keep_their_own_keys() {
        // Cut, copy, paste and select all belong to the field that has the cursor.
        for key in [Key::X, Key::C, Key::V, Key::A] {
            assert!(Command::ALL.iter().flat_map(|one| one.shortcuts()).all(|keys| keys.logical_key != key));
        }
    }
}
