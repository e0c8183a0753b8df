(** The definitions are not empty, and what is not well formed is refused. *)

From Coq Require Import List Permutation PArith Arith Lia.
From Certify Require Import Statement Question Facts.
Import ListNotations.
Open Scope positive_scope.

Definition square :=
  {| order := 4; edges := [(1, 2); (1, 4); (2, 3); (3, 4)]; needed := [(1, 4)] |}.

(** A cycle exists where there is one: [refuted] does not hold of everything. *)
Example square_has_one : ~ refuted square.
Proof.
  intros none. apply none. exists [1; 2; 3; 4]. repeat split.
  - cbn. lia.
  - apply Permutation_refl.
  - cbn. intros u v steps. unfold joined. cbn.
    repeat destruct steps as [[= <- <-] | steps]; tauto.
  - cbn. intros u v [[= <- <-] | []]. unfold used. cbn. tauto.
Qed.

(** Each vertex once, along edges, through what is needed: without one of these it is none. *)
Example not_a_visit : ~ cycle square [1; 2; 3].
Proof. intros (_ & all & _). apply Permutation_length in all. discriminate. Qed.

Example not_twice : ~ cycle square [1; 2; 1; 4].
Proof.
  intros ham. pose proof (cycle_distinct square eq_refl _ ham) as once.
  inversion_clear once as [| ? ? fresh _]. apply fresh. cbn. tauto.
Qed.

Example not_an_edge : ~ cycle square [1; 3; 2; 4].
Proof.
  intros (_ & _ & along & _). destruct (along 1 3) as [step | step]; cbn; [tauto | ..];
    cbn in step; intuition congruence.
Qed.

Definition full must := {| order := 4; needed := must;
  edges := [(1, 2); (1, 3); (1, 4); (2, 3); (2, 4); (3, 4)] |}.

Example not_needed : ~ cycle (full [(1, 3)]) [1; 2; 3; 4].
Proof.
  intros (_ & _ & _ & must). destruct (must 1 3) as [step | step]; cbn; [tauto | ..];
    cbn in step; intuition congruence.
Qed.

(** Two vertices make no cycle, though a walk goes back and forth on their edge. *)
Example pair_refuted : refuted {| order := 2; edges := [(1, 2)]; needed := [] |}.
Proof. apply small_refuted. cbn. lia. Qed.

(** What a question must not be. *)
Definition with_edges n list must := well_formed {| order := n; edges := list; needed := must |}.

Example fine : with_edges 3 [(1, 2); (1, 3); (2, 3)] [(1, 3)] = true.
Proof. reflexivity. Qed.
Example fine_empty : with_edges 0 [] [] = true.
Proof. reflexivity. Qed.
Example loop : with_edges 3 [(1, 2); (2, 2)] [] = false.
Proof. reflexivity. Qed.
Example backwards : with_edges 3 [(1, 2); (3, 2)] [] = false.
Proof. reflexivity. Qed.
Example doubled : with_edges 3 [(1, 2); (1, 2)] [] = false.
Proof. reflexivity. Qed.
Example unsorted : with_edges 3 [(1, 3); (1, 2)] [] = false.
Proof. reflexivity. Qed.
Example beyond : with_edges 3 [(1, 2); (2, 4)] [] = false.
Proof. reflexivity. Qed.
Example beyond_none : with_edges 0 [(1, 2)] [] = false.
Proof. reflexivity. Qed.
Example beyond_one : with_edges 1 [(1, 2)] [] = false.
Proof. reflexivity. Qed.
Example needed_is_no_edge : with_edges 3 [(1, 2); (2, 3)] [(1, 3)] = false.
Proof. reflexivity. Qed.
Example needed_backwards : with_edges 3 [(1, 2); (2, 3)] [(2, 1)] = false.
Proof. reflexivity. Qed.
Example needed_doubled : with_edges 3 [(1, 2); (2, 3)] [(1, 2); (1, 2)] = false.
Proof. reflexivity. Qed.
