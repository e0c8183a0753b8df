(** The examples of formats.txt (nauty), and texts that are cut short, too long or padded. *)

From Coq Require Import Bool List ZArith String.
From Certify Require Import Statement Graph6.
Import ListNotations.
Open Scope Z_scope.

Example graph6_example : read_line "DQc" = Some (5, [(0, 2); (1, 3); (0, 4); (3, 4)]).
Proof. vm_compute. reflexivity. Qed.

Example sparse6_example : read_line ":Fa@x^" = Some (7, [(0, 1); (0, 2); (1, 2); (5, 6)]).
Proof. vm_compute. reflexivity. Qed.

Example few_vertices : read_line "?" = Some (0, []) /\ read_line "@" = Some (1, [])
  /\ read_line "A_" = Some (2, [(0, 1)]) /\ read_line ":@" = Some (1, [])
  /\ read_line ":An" = Some (2, [(0, 1)]).
Proof. vm_compute. auto. Qed.

(** No text, no size, a character too few, one too many, a padding bit that is one, a
    character out of range, and a size that is not in its short form. *)
Example not_graph6 : forallb (fun s => negb (is_graph6 s))
  [""; "~"; "~??"; "DQ"; "DQc?"; "Dhd"; "A`"; "D!c"; "DQ c"; "~??DQc"]%string = true.
Proof. vm_compute. reflexivity. Qed.

(** No size, a loop, bits after the last edge that are not ones, and a byte of ones too many. *)
Example not_sparse6 : forallb (fun s => negb (is_graph6 s))
  [":"; ":A?"; ":Am"; ":Fa@x^~"; ":@~"]%string = true.
Proof. vm_compute. reflexivity. Qed.

(** A text that is not graph6 has no graph to state a theorem about. *)
Fail Definition no_graph : query Z := graph6 "DQ".
