"""The program's own errors: every one says what is wrong, with which part, and what to do about it.

OneLineFaultError
├── EntryError            a typed text cannot be read as the quantity asked for
├── EditError             an edit that the plant refuses
├── PlantFileError        a plant file that cannot be read or written
├── StudyError            a calculation that cannot be done for the data given
│   ├── NoSuchPlaceError  a fault was asked for where nothing is
│   └── StoppedError      the user stopped a long calculation
└── OutputError           a drawing or table that cannot be written
"""


class OneLineFaultError(Exception):
    """Base of all errors that are meant for the user's eyes: one clear sentence each."""


class EntryError(OneLineFaultError):
    """A typed text cannot be read as the quantity that the field asks for."""


class EditError(OneLineFaultError):
    """The plant refuses an edit; the plant stays as it was."""


class PlantFileError(OneLineFaultError):
    """A plant file cannot be read or written; nothing on disk or in memory was changed."""


class StudyError(OneLineFaultError):
    """A calculation cannot be done for the data given."""


class NoSuchPlaceError(StudyError):
    """A fault was asked for at a place that the plant does not have."""


class StoppedError(StudyError):
    """A long calculation was stopped by the user."""


class OutputError(OneLineFaultError):
    """A drawing, table or report cannot be written."""
