(** * Endless claims: attacks

    Graphs with known answers, strips that the rule does not fit, and claims that are untrue for
    one n only. *)

From Coq Require Import Bool List ZArith Permutation Lia ZifyBool.
From Certify Require Import Statement Rules RulesSpec EndlessPlan EndlessQuery EndlessGrow
  EndlessLayers EndlessStrip Endless EndlessRules.
Import ListNotations.
Open Scope Z_scope.
Open Scope lazy_bool_scope.

(** ** One graph: Petersen's has no cycle (Petersen, L'Intermédiaire des Mathématiciens 5 (1898)
    225-227), but a path, and a cycle when a vertex is removed (textbook facts, from memory). *)

Definition petersen_edges : list (Z * Z) :=
  [(1,2);(1,5);(1,6);(2,3);(2,7);(3,4);(3,8);(4,5);(4,9);(5,10);(6,8);(6,9);(7,9);(7,10);(8,10)].

Definition petersen (lo : Z) : query Z :=
  {| vertices := range lo 10;
     adjacent := fun a b => existsb (fun e => ((fst e =? a) &&& (snd e =? b))
                                          ||| ((fst e =? b) &&& (snd e =? a))) petersen_edges;
     ends := []; required := []; forbidden := [] |}.

Example petersen_answers :
  (small_answer (petersen 1) false (range 1 10), small_answer (petersen 1) true (range 1 10),
   small_answer (petersen 2) false (range 2 10)) = (false, true, true).
Proof. vm_compute. reflexivity. Qed.

(** Whichever vertices are fixed, the answer is the same. *)
Example petersen_fixed :
  let ask lo k :=
    answer (lifted (petersen lo)) (map Some (range (k + 1) 10)) 10 (map Some (range lo k)) in
  map (fun k => (ask 1 k, ask 2 k)) [2; 4; 6; 9] = repeat (false, true) 4.
Proof. vm_compute. reflexivity. Qed.

(** Two cycles are not one, and the smallest graphs. *)
Definition by_distance (steps : list Z) (n : Z) : query Z :=
  {| vertices := range 1 n; adjacent := fun a b => member (Z.abs (a - b)) steps;
     ends := []; required := []; forbidden := [] |}.

Definition triangles (k : Z) : query Z :=
  {| vertices := range 0 (3 * k - 1);
     adjacent := fun a b => ((a / 3) =? (b / 3)) &&& (negb (a =? b));
     ends := []; required := []; forbidden := [] |}.

Example two_triangles :
  (small_answer (triangles 1) false (range 0 2), small_answer (triangles 2) false (range 0 5),
   small_answer (triangles 2) true (range 0 5)) = (true, false, false).
Proof. vm_compute. reflexivity. Qed.

Example smallest :
  map (fun n => (small_answer (by_distance [1; 2] n) true (range 1 n),
                 small_answer (by_distance [1; 2] n) false (range 1 n))) [0; 1; 2; 3]
  = [(false, false); (true, false); (true, false); (true, true)].
Proof. vm_compute. reflexivity. Qed.

(** ** Claims that are untrue *)

Definition strides := by_distance [2; 3].
Definition strides_strip : strip Z :=
  {| layer := fun x => [x]; move := fun x => x + 1; low := 1; up := 0;
     height := 1; span := 3; zone := 0; period := 1; least := 2; enough := 11; cut := 7 |}.

(** There are cycles for n = 5 and for all n >= 10; the claims after the first differ from that for
    one n. *)
Definition true_claim (n : Z) : bool := (n =? 5) ||| (10 <=? n).
Definition but_small (n : Z) : bool := (10 <=? n).
Definition but_once (n : Z) : bool := (true_claim n) &&& (negb (n =? 13)).
Definition but_later (n : Z) : bool := (true_claim n) &&& (negb (n =? 99)).

Example true_one :
  (check_small strides false strides_strip true_claim,
   check_endless strides false strides_strip 3 1 true_claim) = (true, true).
Proof. vm_compute. reflexivity. Qed.

Example untrue_ones :
  (check_small strides false strides_strip but_small,
   check_endless strides false strides_strip 3 1 but_once) = (false, false).
Proof. vm_compute. reflexivity. Qed.

(** Too early: the states do not come again yet. And no period at all. *)
Example too_early : check_endless strides false strides_strip 0 1 true_claim = false.
Proof. vm_compute. reflexivity. Qed.

Example no_period : check_endless strides false strides_strip 3 0 true_claim = false.
Proof. vm_compute. reflexivity. Qed.

(** Untrue only beyond what is computed: then it does not come again, and the other hypothesis
    fails. *)
Definition comes_again (claimed : Z -> bool) : Prop :=
  forall n, enough strides_strip + Z.of_nat 3 * period strides_strip <= n ->
    claimed (n + Z.of_nat 1 * period strides_strip) = claimed n.

Example later_computed : check_endless strides false strides_strip 3 1 but_later = true.
Proof. vm_compute. reflexivity. Qed.

Lemma later_not_again : ~ comes_again but_later.
Proof. intros again. assert (never := again 98). discriminate never. vm_compute. discriminate. Qed.

Example later_not_found : True.
Proof.
  assert_succeeds
    (assert (comes_again true_claim) by (unfold comes_again; by_claim true_claim strides_strip)).
  assert_fails
    (assert (comes_again but_later) by (unfold comes_again; by_claim but_later strides_strip)).
  exact I.
Qed.

(** ** Strips that do not fit *)

Definition wrong (reach : nat) (from_bound from_cut lowest : Z) : strip Z :=
  {| layer := fun x => [x]; move := fun x => x + 1; low := lowest; up := 0; height := 1;
     span := reach; zone := 0; period := 1; least := 2; enough := from_bound; cut := from_cut |}.

(** No room after the cut for the window; the cut before the first layer; the bound too low. *)
Example sizes_wrong :
  (sizes_fine (wrong 3 11 7 1), sizes_fine (wrong 3 11 8 1), sizes_fine (wrong 3 11 (-1) 1),
   sizes_fine (wrong 3 1 (-4) 1)) = (true, false, false, false).
Proof. vm_compute. reflexivity. Qed.

Definition short_reach := wrong 2 11 7 1.
Definition low_missing := wrong 3 11 7 2.

Lemma short_reach_wrong : ~ like_strip strides short_reach.
Proof.
  intros fits. assert (never := far_layers strides short_reach fits 11 1 4 1 4).
  unfold inner_final, final in never. cbn in never.
  discriminate never; try lia; now left.
Qed.

Lemma low_missing_wrong : ~ like_strip strides low_missing.
Proof.
  intros fits. assert (all := all_layers fits 2 (Z.le_refl _)).
  apply Permutation_length in all. discriminate all.
Qed.

(** Residues modulo 2, taken for a period of 1; a ring without its fixed layers. *)
Definition of_parity (n : Z) : query Z :=
  {| vertices := range 1 n;
     adjacent := fun a b =>
       (Z.abs (a - b) =? 1) ||| ((Z.abs (a - b) =? 3) &&& (Z.min a b mod 2 =? 0));
     ends := []; required := []; forbidden := [] |}.
Definition ring (n : Z) : query Z :=
  {| vertices := range 1 n; adjacent := fun a b => member ((a - b) mod n) [1; n - 1];
     ends := []; required := []; forbidden := [] |}.
Definition odd_period := wrong 3 11 7 1.
Definition no_zone := wrong 1 11 7 1.

(** The tactic finds none of these. *)
Example none_found : True.
Proof.
  assert_fails (assert (like_strip strides short_reach) by by_rule strides short_reach).
  assert_fails (assert (like_strip strides low_missing) by by_rule strides low_missing).
  assert_fails (assert (like_strip of_parity odd_period) by by_rule of_parity odd_period).
  assert_fails (assert (like_strip ring no_zone) by by_rule ring no_zone).
  exact I.
Qed.

Definition with_zone : strip Z :=
  {| layer := fun x => [x]; move := fun x => x + 1; low := 1; up := 0; height := 1; span := 1;
     zone := 1; period := 1; least := 3; enough := 9; cut := 3 |}.

Lemma ring_fits : like_strip ring with_zone.
Proof. by_rule ring with_zone. Qed.

(** A ring is a cycle. *)
Theorem ring_cycles : forall n, 3 <= n -> ((exists h, ham_cycle (ring n) h) <-> true = true).
Proof.
  apply (endless ring false with_zone 1 1 (fun _ => true) ring_fits).
  - reflexivity.
  - apply (check_small_spec ring false with_zone (fun _ => true) ring_fits).
    vm_cast_no_check (eq_refl true).
  - vm_cast_no_check (eq_refl true).
Qed.
