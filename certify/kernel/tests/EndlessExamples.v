(** * Endless claims: examples

    Theorems for all n, of published families, and of two more in which residues matter. *)

From Coq Require Import Bool List ZArith Permutation Lia ZifyBool.
From Certify Require Import Statement Rules RulesSpec EndlessLayers Endless EndlessRules.
Import ListNotations.
Open Scope Z_scope.
Open Scope lazy_bool_scope.

(** A board of four rows has no closed tour of the knight, whatever its length: Schwenk,
    Mathematics Magazine 64 (1991) 325-332. *)
Definition knights (n : Z) : query (Z * Z) :=
  {| vertices := extend (range 1 4) (fun _ => range 1 n);
     adjacent := fun '(a_x, a_y) '(b_x, b_y) =>
       same_set [Z.abs (a_x - b_x); Z.abs (a_y - b_y)] [1; 2];
     ends := []; required := []; forbidden := [] |}.

Definition knights_claim (n : Z) : bool := false.

Definition knights_strip : strip (Z * Z) :=
  {| layer := fun y => extend (range 1 4) (fun _ => [y]); move := fun '(x, y) => (x, y + 1);
     low := 1; up := 0; height := 4; span := 2; zone := 0; period := 1; least := 1;
     enough := 6; cut := 2 |}.

Lemma knights_fit : like_strip knights knights_strip.
Proof. by_rule knights knights_strip. Qed.

Theorem knights_all : forall n, 1 <= n ->
  ((exists h, ham_cycle (knights n) h) <-> knights_claim n = true).
Proof.
  apply (endless knights false knights_strip 6 1 knights_claim knights_fit).
  - by_claim knights_claim knights_strip.
  - apply (check_small_spec knights false knights_strip knights_claim knights_fit).
    vm_cast_no_check (eq_refl true).
  - vm_cast_no_check (eq_refl true).
Qed.

(** The flower with n petals has a Hamiltonian cycle exactly when n is even: Isaacs, American
    Mathematical Monthly 82 (1975) 221-239, for odd n >= 5. The last petal is fixed. *)
Definition flowers (n : Z) : query (Z * Z) :=
  {| vertices := extend (range 0 3) (fun _ => range 0 (n - 1));
     adjacent := fun '(a_tip, a_petal) '(b_tip, b_petal) =>
       ((a_petal =? b_petal) &&& (negb (Bool.eqb (a_tip =? 0) (b_tip =? 0))))
       ||| (((a_tip =? b_tip) &&& (b_tip =? 1)) &&& (member ((a_petal - b_petal) mod n) [1; n - 1]))
       ||| ((member a_tip [2; 3]) &&& (member b_tip [2; 3]) &&&
            (((Z.abs (a_petal - b_petal) =? 1) &&& (a_tip =? b_tip))
             ||| ((Z.abs (a_petal - b_petal) =? (n - 1)) &&& (negb (a_tip =? b_tip)))));
     ends := []; required := []; forbidden := [] |}.

Definition flowers_claim (n : Z) : bool := (n mod 2) =? 0.

Definition flowers_strip : strip (Z * Z) :=
  {| layer := fun y => extend (range 0 3) (fun _ => [y]); move := fun '(x, y) => (x, y + 1);
     low := 0; up := -1; height := 4; span := 1; zone := 1; period := 1; least := 3;
     enough := 7; cut := 2 |}.

Lemma flowers_fit : like_strip flowers flowers_strip.
Proof. by_rule flowers flowers_strip. Qed.

Theorem flowers_all : forall n, 3 <= n ->
  ((exists h, ham_cycle (flowers n) h) <-> flowers_claim n = true).
Proof.
  apply (endless flowers false flowers_strip 2 2 flowers_claim flowers_fit).
  - by_claim flowers_claim flowers_strip.
  - apply (check_small_spec flowers false flowers_strip flowers_claim flowers_fit).
    vm_cast_no_check (eq_refl true).
  - vm_cast_no_check (eq_refl true).
Qed.

(** Strides of 2 and 3 along a row: cycles (no source). *)
Definition strides (n : Z) : query Z :=
  {| vertices := range 1 n;
     adjacent := fun a b => member (Z.abs (a - b)) [2; 3];
     ends := []; required := []; forbidden := [] |}.

Definition strides_claim (n : Z) : bool := (n =? 5) ||| (10 <=? n).

Definition strides_strip : strip Z :=
  {| layer := fun x => [x]; move := fun x => x + 1; low := 1; up := 0;
     height := 1; span := 3; zone := 0; period := 1; least := 2; enough := 11; cut := 7 |}.

Lemma strides_fit : like_strip strides strides_strip.
Proof. by_rule strides strides_strip. Qed.

Theorem strides_all : forall n, 2 <= n ->
  ((exists h, ham_cycle (strides n) h) <-> strides_claim n = true).
Proof.
  apply (endless strides false strides_strip 3 1 strides_claim strides_fit).
  - by_claim strides_claim strides_strip.
  - apply (check_small_spec strides false strides_strip strides_claim strides_fit).
    vm_cast_no_check (eq_refl true).
  - vm_cast_no_check (eq_refl true).
Qed.

(** A rule with residues and with ends of its own: beds 0, ..., n + 1 without those of the form
    6k + 5, and steps of one kind or another (no source; the answers of small n are found
    by their own sweeps). *)
Definition residues (n : Z) : query Z :=
  {| vertices := filter (fun a => negb ((a mod 6) =? 5)) (range 0 (n + 1));
     adjacent := fun a b =>
       ((Z.abs (a - b)) =? 2)
       ||| (((Z.abs (a - b)) <=? 3) &&& (negb ((Z.min (a mod 3) (b mod 3)) =? 0)))
       ||| (((Z.min a b) =? 0) &&& ((Z.max a b) =? 1))
       ||| (((Z.max a b) =? (n + 1)) &&& ((Z.min a b) =? n));
     ends := []; required := []; forbidden := [] |}.

Definition residues_claim (n : Z) : bool := n <=? 10.

Definition residues_strip : strip Z :=
  {| layer := fun x => filter (fun a => negb ((a mod 6) =? 5)) [x]; move := fun x => x + 6;
     low := 0; up := 1; height := 1; span := 3; zone := 0; period := 6; least := 2;
     enough := 18; cut := 10 |}.

Lemma residues_fit : like_strip residues residues_strip.
Proof. by_rule residues residues_strip. Qed.

Theorem residues_all : forall n, 2 <= n ->
  ((exists h, ham_path (residues n) h) <-> residues_claim n = true).
Proof.
  apply (endless residues true residues_strip 3 1 residues_claim residues_fit).
  - by_claim residues_claim residues_strip.
  - apply (check_small_spec residues true residues_strip residues_claim residues_fit).
    vm_cast_no_check (eq_refl true).
  - vm_cast_no_check (eq_refl true).
Qed.
