(** Certificates for another query, tables that leave out, swap or misjudge an instance, and
    evidence that answers the wrong way. *)

From Coq Require Import Bool List ZArith.
From Certify Require Import Statement Question Obstruction Rules EdgeGraph Normal Certificate Table.
Import ListNotations.
Open Scope Z_scope.

Ltac computed := vm_compute; reflexivity.

(** Rows of 1..n with differences 1 or 2: there is one for every n >= 1. *)
Definition steps (n : Z) : query Z :=
  {| vertices := range 1 n; adjacent := fun a b => member (Z.abs (a - b)) [1; 2];
     ends := []; required := []; forbidden := [] |}.

(** Rows of 1..n with differences 2 or 4: there is none for n >= 2. *)
Definition even_steps (n : Z) : query Z :=
  {| vertices := range 1 n; adjacent := fun a b => member (Z.abs (a - b)) [2; 4];
     ends := []; required := []; forbidden := [] |}.

(** The apex separates odd and even numbers. *)
Definition apart : certificate := ByObstruction (Separator [6])%positive.
Definition there : certificate := ByWitness [1; 2; 3; 4; 5]%positive.

Example impossible : check_path (even_steps 5) false apart = true. Proof. computed. Qed.
Example exists_ : check_path (steps 5) true there = true. Proof. computed. Qed.
Example other_query : check_path (steps 5) false apart = false. Proof. computed. Qed.
Example other_size : check_path (even_steps 6) false apart = false. Proof. computed. Qed.
Example other_witness : check_path (even_steps 5) true there = false. Proof. computed. Qed.
Example other_answer : check_path (even_steps 5) true apart = false. Proof. computed. Qed.
Example witness_against : check_path (steps 5) false there = false. Proof. computed. Qed.
Example not_absent : check_path (even_steps 5) false ByAbsence = false. Proof. computed. Qed.
(** An obstruction speaks of the cycle through the apex: for n = 1 that is not the path. *)
Example one_vertex :
  forallb (fun c => negb (check_path (steps 1) false c))
    [ByAbsence; ByObstruction Small; ByObstruction (Leaf 1%positive);
     ByObstruction (Leaf 2%positive); ByObstruction (Separator [])] = true.
Proof. computed. Qed.
Example no_vertex : check_path (steps 0) false (ByObstruction Small) = true. Proof. computed. Qed.
Example absent : check_path (demand (steps 5) [9] [] []) false ByAbsence = true.
Proof. computed. Qed.
Example absent_only : check_path (demand (even_steps 5) [9] [] []) false apart = false.
Proof. computed. Qed.
(** A vertex listed twice: no kind is accepted. *)
Definition doubled : query Z :=
  {| vertices := [1; 2; 3; 3]; adjacent := fun a b => negb (a =? b);
     ends := []; required := []; forbidden := [] |}.
Example unfit :
  forallb (fun c => negb (check_path doubled false c || check_cycle doubled false c))
    [ByAbsence; ByObstruction Small; ByObstruction (Leaf 4%positive)] = true.
Proof. computed. Qed.

(** A table of two families: n = 5 with the even steps and with both. *)
Definition Q (row : Z * Z) : query Z :=
  let '(k, n) := row in if k =? 0 then even_steps n else steps n.
Definition claimed (row : Z * Z) : bool := let '(k, n) := row in k =? 1.
Definition instances : list (Z * Z) := extend (range 0 1) (fun _ => [5]).

Example whole : check_path_table Q claimed instances [apart; there] = true.
Proof. computed. Qed.
Example swapped : check_path_table Q claimed instances [there; apart] = false.
Proof. computed. Qed.
Example left_out : check_path_table Q claimed instances [apart] = false.
Proof. computed. Qed.
Example one_more : check_path_table Q claimed instances [apart; there; there] = false.
Proof. computed. Qed.
Example misjudged : check_path_table Q (fun _ => true) instances [apart; there] = false.
Proof. computed. Qed.
Example turned : check_path_table Q (fun row => negb (claimed row)) instances [apart; there] = false.
Proof. computed. Qed.

Example counts : check_count check_path (map Q instances) [apart; there] = Some 1%nat.
Proof. computed. Qed.
Example counts_short : check_count check_path (map Q instances) [apart] = None.
Proof. computed. Qed.
Example counts_wrong : check_count check_path (map Q instances) [apart; apart] = None.
Proof. computed. Qed.
