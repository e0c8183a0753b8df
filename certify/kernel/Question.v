(** * The question in normal form

    Every query becomes one question: has this graph a Hamiltonian cycle that uses all
    required edges? Its vertices are the numbers 1, ..., [order], so that they can be
    keys of finite maps (FORMAT.md counts from 0: its vertex [v] is [v + 1] here). *)

From Coq Require Import Bool List Permutation PArith Arith FMapPositive Lia.
From Certify Require Import Statement.
Import ListNotations.

Definition vertex := positive.

Record question := {
  order : nat;
  edges : list (vertex * vertex);
  needed : list (vertex * vertex)
}.

Definition all_vertices (n : nat) : list vertex := map Pos.of_nat (seq 1 n).

Section Question.

Variable Q : question.

Definition joined (u v : vertex) : Prop := In (u, v) (edges Q) \/ In (v, u) (edges Q).

(** [used h u v]: the cycle [h] goes from one to the other of the two. *)
Definition used (h : list vertex) (u v : vertex) : Prop :=
  In (u, v) (cycle_steps h) \/ In (v, u) (cycle_steps h).

Definition cycle (h : list vertex) : Prop :=
  3 <= length h /\
  Permutation h (all_vertices (order Q)) /\
  (forall u v, In (u, v) (cycle_steps h) -> joined u v) /\
  (forall u v, In (u, v) (needed Q) -> used h u v).

Definition refuted : Prop := ~ exists h, cycle h.

(** Edges are pairs [u < v] of vertices, sorted, each once; so are the needed ones,
    which are edges. *)
Definition pair_ltb (e f : vertex * vertex) : bool :=
  (fst e <? fst f)%positive || ((fst e =? fst f)%positive && (snd e <? snd f)%positive).

Fixpoint sorted_pairs (l : list (vertex * vertex)) : bool :=
  match l with
  | e :: (f :: _) as rest => pair_ltb e f && sorted_pairs rest
  | _ => true
  end.

Definition pair_fine (n : positive) (e : vertex * vertex) : bool :=
  (fst e <? snd e)%positive && (snd e <=? n)%positive.

(** [subset l m] for sorted lists, by one walk along both. *)
Fixpoint subset (l m : list (vertex * vertex)) : bool :=
  match l with
  | [] => true
  | e :: l' =>
      (fix seek m := match m with
                     | [] => false
                     | f :: m' =>
                         if (fst e =? fst f)%positive && (snd e =? snd f)%positive
                         then subset l' m' else seek m'
                     end) m
  end.

Definition well_formed : bool :=
  match order Q with
  | O => match edges Q, needed Q with [], [] => true | _, _ => false end
  | S _ as n =>
      forallb (pair_fine (Pos.of_nat n)) (edges Q)
      && sorted_pairs (edges Q) && sorted_pairs (needed Q)
      && subset (needed Q) (edges Q)
  end.

(** Neighbours by vertex. *)
Definition insert (u v : vertex) (m : PositiveMap.t (list vertex)) :=
  match PositiveMap.find u m with
  | Some l => PositiveMap.add u (v :: l) m
  | None => PositiveMap.add u [v] m
  end.

Definition adjacency : PositiveMap.t (list vertex) :=
  fold_left (fun m e => insert (fst e) (snd e) (insert (snd e) (fst e) m))
    (edges Q) (PositiveMap.empty _).

Definition neighbours (m : PositiveMap.t (list vertex)) (v : vertex) : list vertex :=
  match PositiveMap.find v m with Some l => l | None => [] end.

End Question.

Definition pair_eqb (e f : vertex * vertex) : bool :=
  (fst e =? fst f)%positive && (snd e =? snd f)%positive.
