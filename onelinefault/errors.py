"""The program's own errors: every one says what is wrong, with which part, and what to do about it.

OneLineFaultError
├── EntryError            a typed text cannot be read as the quantity asked for
├── EditError             an edit that the plant refuses
├── PlantFileError        a plant file that cannot be read or written
│   ├── FileChangedError  the file on disk is not the one that was read
│   └── FileInUseError    somebody else has the file open
├── StudyError            a calculation that cannot be done for the data given
│   ├── NoSuchPlaceError  a fault was asked for where nothing is
│   ├── SingularNetworkError  the network equations have no single solution
│   └── StoppedError      the user stopped a long calculation
├── TablesError           the typical data shipped with the program cannot be read
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


class FileChangedError(PlantFileError):
    """The file on disk is not the one that was read: writing would undo somebody else's work."""


class FileInUseError(PlantFileError):
    """Another program or person has the plant file open for editing."""


class StudyError(OneLineFaultError):
    """A calculation cannot be done for the data given."""


class NoSuchPlaceError(StudyError):
    """A fault was asked for at a place that the plant does not have."""


class SingularNetworkError(StudyError):
    """The network equations have no single solution; the impedances around one node cancel.

    node: the node (its number in the network) where the elimination first failed, scenario: the matrix (sequence) it
    failed in, for a caller that knows their names; −1 where unknown.
    """

    def __init__(self, message: str, node: int = -1, scenario: int = -1) -> None:
        super().__init__(message)
        self.node = node
        self.scenario = scenario


class StoppedError(StudyError):
    """A long calculation was stopped by the user."""


class TablesError(OneLineFaultError):
    """The tables of typical data that are shipped with the program are missing or damaged."""


class OutputError(OneLineFaultError):
    """A drawing, table or report cannot be written."""
