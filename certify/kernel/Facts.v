(** * What holds for every Hamiltonian cycle

    Degree, cut, no shorter cycle, symmetry: the lemmas from which each kind of
    evidence follows. *)

From Coq Require Import Bool List Permutation PArith Arith FMapPositive Lia.
From Certify Require Import Statement Question.
Import ListNotations.

(** [uses h e]: [used], computed. *)
Definition uses (h : list vertex) (e : vertex * vertex) : bool :=
  existsb (fun f => pair_eqb e f || pair_eqb (snd e, fst e) f) (cycle_steps h).

Definition count {A : Type} (p : A -> bool) (l : list A) : nat := length (filter p l).

Definition touches (v : vertex) (e : vertex * vertex) : bool :=
  (fst e =? v)%positive || (snd e =? v)%positive.

Definition leaves (s : vertex -> bool) (e : vertex * vertex) : bool :=
  xorb (s (fst e)) (s (snd e)).

Section Facts.

Variable Q : question.
Hypothesis fine : well_formed Q = true.

Lemma joined_sym : forall u v, joined Q u v -> joined Q v u.
Proof. unfold joined; tauto. Qed.

Lemma neighbours_joined : forall u v,
  In v (neighbours (adjacency Q) u) <-> joined Q u v.
Admitted.

Lemma neighbours_distinct : forall u, NoDup (neighbours (adjacency Q) u).
Admitted.

Lemma edges_distinct : NoDup (edges Q).
Admitted.

Lemma joined_differ : forall u v, joined Q u v -> u <> v.
Admitted.

Lemma joined_vertices : forall u v,
  joined Q u v -> In u (all_vertices (order Q)) /\ In v (all_vertices (order Q)).
Admitted.

Lemma needed_edges : forall e, In e (needed Q) -> In e (edges Q).
Admitted.

Variable h : list vertex.
Hypothesis ham : cycle Q h.

Lemma uses_spec : forall u v, uses h (u, v) = true <-> used h u v.
Admitted.

Lemma uses_sym : forall u v, uses h (u, v) = uses h (v, u).
Admitted.

Lemma cycle_distinct : NoDup h.
Admitted.

Lemma cycle_visits : forall v, In v h <-> In v (all_vertices (order Q)).
Admitted.

Lemma used_joined : forall u v, used h u v -> joined Q u v.
Admitted.

Lemma used_sym : forall u v, used h u v -> used h v u.
Admitted.

(** The two neighbours of a vertex along the cycle. *)
Lemma degree : forall v, In v (all_vertices (order Q)) ->
  exists a b, a <> b /\ forall c, used h v c <-> c = a \/ c = b.
Admitted.

(** The same, counted along the edges of the question, and along the neighbours. *)
Lemma degree_count : forall v, In v (all_vertices (order Q)) ->
  count (fun e => touches v e && uses h e) (edges Q) = 2.
Admitted.

Lemma degree_neighbours : forall v, In v (all_vertices (order Q)) ->
  count (fun u => uses h (v, u)) (neighbours (adjacency Q) v) = 2.
Admitted.

(** The cycle leaves every set of some, not all vertices, and an even number of times. *)
Lemma cut_count : forall s u v,
  In u (all_vertices (order Q)) -> In v (all_vertices (order Q)) ->
  s u = true -> s v = false ->
  2 <= count (fun e => leaves s e && uses h e) (edges Q).
Admitted.

Lemma cut_even : forall s,
  Nat.Even (count (fun e => leaves s e && uses h e) (edges Q)).
Admitted.

Lemma cut_leaves : forall s u v,
  In u (all_vertices (order Q)) -> In v (all_vertices (order Q)) ->
  s u = true -> s v = false ->
  exists a b, s a = true /\ s b = false /\ used h a b.
Admitted.

(** It has as many edges as vertices. *)
Lemma total_count : count (uses h) (edges Q) = order Q.
Admitted.

(** No shorter cycle: used edges that close a cycle visit everything. *)
Lemma no_shorter_cycle : forall c,
  NoDup c -> 3 <= length c ->
  (forall u v, In (u, v) (cycle_steps c) -> used h u v) ->
  length c = order Q.
Admitted.

(** A path of used edges that does not visit everything is not closed by one more. *)
Lemma no_early_closing : forall a c b,
  NoDup (a :: c ++ [b]) -> 1 <= length c ->
  (forall u v, In (u, v) (path_steps (a :: c ++ [b])) -> used h u v) ->
  length (a :: c ++ [b]) < order Q ->
  ~ used h a b.
Admitted.

(** An automorphism takes the cycle to a cycle. *)
Lemma image_cycle : forall p : vertex -> vertex,
  (forall v, In v (all_vertices (order Q)) -> In (p v) (all_vertices (order Q))) ->
  (forall u v, In u (all_vertices (order Q)) -> In v (all_vertices (order Q)) ->
     p u = p v -> u = v) ->
  (forall u v, joined Q u v -> joined Q (p u) (p v)) ->
  (forall u v, In (u, v) (needed Q) ->
     exists x y, (In (x, y) (needed Q) \/ In (y, x) (needed Q)) /\ p x = u /\ p y = v) ->
  cycle Q (map p h).
Admitted.

Lemma image_used : forall (p : vertex -> vertex) u v,
  (forall x y, In x (all_vertices (order Q)) -> In y (all_vertices (order Q)) ->
     p x = p y -> x = y) ->
  In u (all_vertices (order Q)) -> In v (all_vertices (order Q)) ->
  used (map p h) (p u) (p v) <-> used h u v.
Admitted.

End Facts.

(** The edge joined to itself, the empty cut and the like never arise: [cycle] needs three
    vertices. *)
Lemma small_refuted : forall Q, order Q < 3 -> refuted Q.
Admitted.
