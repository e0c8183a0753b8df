(** * Is the statement what a textbook says?

    Nothing of the kernel is proved here. A wrong definition in Statement.v would make
    every theorem worthless, so these are theorems about the definitions, of what everybody
    knows about Hamiltonian paths and cycles. StatementSearch.v compares the definitions with
    a search through all orders of the vertices. *)

From Coq Require Import Bool List Permutation Arith Lia.
From Certify Require Import Statement.
Import ListNotations.

(** ** Steps *)

Section Steps.

Context {V : Type}.

(** The steps of a path are its pairs of neighbours: [u] and [v] stand side by side. *)
Lemma steps_are_neighbours : forall (h : list V) u v,
  In (u, v) (path_steps h) <-> exists l r, h = l ++ u :: v :: r.
Proof.
  induction h as [|x h IH]; intros u v.
  - split; [contradiction|]. intros (l & r & Heq). now destruct l.
  - destruct h as [|y h]; simpl In.
    + split; [contradiction|]. intros (l & r & Heq).
      destruct l as [|? [|? ?]]; discriminate.
    + change (path_steps (x :: y :: h)) with ((x, y) :: path_steps (y :: h)). simpl.
      fold (path_steps (y :: h)). rewrite IH. split.
      * intros [Heq | (l & r & Heq)].
        -- injection Heq as -> ->. now exists [], h.
        -- exists (x :: l), r. now rewrite Heq.
      * intros ([|z l] & r & Heq).
        -- injection Heq as -> -> ->. now left.
        -- injection Heq as -> Heq. right. now exists l, r.
Qed.

Lemma path_steps_app : forall (l r : list V) u,
  path_steps (l ++ u :: r) = path_steps (l ++ [u]) ++ path_steps (u :: r).
Proof.
  induction l as [|x l IH]; intros r u; [reflexivity|].
  destruct l as [|y l]; [reflexivity|].
  change (path_steps ((x :: y :: l) ++ u :: r)) with ((x, y) :: path_steps ((y :: l) ++ u :: r)).
  now rewrite IH.
Qed.

Lemma path_steps_rev : forall (h : list V) u v,
  In (u, v) (path_steps (rev h)) <-> In (v, u) (path_steps h).
Proof.
  assert (Hone : forall (h : list V) u v,
            In (u, v) (path_steps h) -> In (v, u) (path_steps (rev h))).
  { intros h u v Hin. apply steps_are_neighbours in Hin. destruct Hin as (l & r & ->).
    apply steps_are_neighbours. exists (rev r), (rev l).
    rewrite rev_app_distr. simpl. now rewrite <- !app_assoc. }
  intros h u v. split; intros Hin.
  - rewrite <- (rev_involutive h). now apply Hone.
  - now apply Hone.
Qed.

(** A path of n vertices has n - 1 steps, a cycle has n. *)
Lemma path_steps_length : forall h : list V, length (path_steps h) = length h - 1.
Proof.
  induction h as [|x [|y h] IH]; [reflexivity..|].
  change (S (length (path_steps (y :: h))) = S (S (length h)) - 1). rewrite IH. simpl. lia.
Qed.

Lemma cycle_steps_length : forall h : list V, length (cycle_steps h) = length h.
Proof.
  intros [|u h]; [reflexivity|]. unfold cycle_steps.
  rewrite path_steps_length, app_length. simpl. lia.
Qed.

End Steps.

(** ** Paths and cycles of any query *)

Section Known.

Context {V : Type}.
Variable Q : query V.

(** Each vertex is visited, no other one is, and none twice. *)
Lemma visits_each_once : forall h steps, NoDup (vertices Q) -> visits Q h steps ->
  NoDup h /\ length h = length (vertices Q) /\ forall v, In v h <-> In v (vertices Q).
Proof.
  intros h steps Hdup (Hperm & _). split; [|split].
  - apply Permutation_NoDup with (vertices Q); [now symmetry | exact Hdup].
  - now apply Permutation_length.
  - intros v. split; apply Permutation_in; [|symmetry]; exact Hperm.
Qed.

(** A cycle without its last step is a path, if no edge is required. *)
Theorem cycle_gives_path : required Q = [] -> ends Q = [] ->
  forall h, ham_cycle Q h -> ham_path Q h.
Proof.
  intros Hrequired Hends h (Hlength & Hperm & Hsteps & _).
  split; [intros ->; simpl in Hlength; lia|]. split; [|now unfold has_ends; rewrite Hends].
  split; [exact Hperm|]. split.
  - intros u v Hin. apply Hsteps. destruct h as [|x h]; [contradiction|].
    unfold cycle_steps. apply steps_are_neighbours in Hin. destruct Hin as (l & r & Heq).
    rewrite Heq. apply steps_are_neighbours. exists l, (r ++ [x]). now rewrite <- app_assoc.
  - rewrite Hrequired. contradiction.
Qed.

(** A cycle may begin anywhere. *)
Lemma cycle_steps_turn : forall (h : list V) x e,
  In e (cycle_steps (h ++ [x])) <-> In e (cycle_steps (x :: h)).
Proof.
  intros [|y h] x e; [reflexivity|].
  assert (Hleft : cycle_steps ((y :: h) ++ [x]) = path_steps ((y :: h) ++ [x]) ++ [(x, y)]).
  { change (path_steps (((y :: h) ++ [x]) ++ [y]) = path_steps ((y :: h) ++ [x]) ++ [(x, y)]).
    rewrite <- app_assoc. apply (path_steps_app (y :: h) [y] x). }
  assert (Hright : cycle_steps (x :: y :: h) = (x, y) :: path_steps ((y :: h) ++ [x]))
    by reflexivity.
  rewrite Hleft, Hright, in_app_iff. simpl. tauto.
Qed.

Theorem cycle_turned : forall h x, ham_cycle Q (x :: h) <-> ham_cycle Q (h ++ [x]).
Proof.
  intros h x. unfold ham_cycle, visits. setoid_rewrite cycle_steps_turn.
  rewrite app_length, Nat.add_comm. simpl length.
  assert (Hperm : Permutation (h ++ [x]) (x :: h)) by (symmetry; apply Permutation_cons_append).
  split; intros (Hlength & Hvertices & Hrest); (split; [exact Hlength|]; split; [|exact Hrest]);
    rewrite <- Hvertices; [exact Hperm | now symmetry].
Qed.

(** In a graph whose edges go both ways, a path may be walked backwards, and so may a
    cycle: the ends and the required edges are no obstacle. *)
Hypothesis both_ways : forall u v, adjacent Q u v = adjacent Q v u.

Lemma edge_both_ways : forall u v, edge Q u v -> edge Q v u.
Proof. intros u v (Hadjacent & ? & ?). split; [now rewrite both_ways | now split]. Qed.

Lemma starts_rev : forall (h : list V) s, starts (rev h) s <-> stops h s.
Proof.
  intros h s. split.
  - intros [rest Heq]. exists (rev rest). now rewrite <- (rev_involutive h), Heq.
  - intros [rest ->]. exists (rev rest). now rewrite rev_app_distr.
Qed.

Lemma stops_rev : forall (h : list V) s, stops (rev h) s <-> starts h s.
Proof. intros h s. now rewrite <- starts_rev, rev_involutive. Qed.

Theorem path_backwards : forall h, ham_path Q h -> ham_path Q (rev h).
Proof.
  intros h (Hsome & (Hperm & Hsteps & Hrequired) & Hends). split; [|split; [split; [|split]|]].
  - intros Heq. apply Hsome. now rewrite <- (rev_involutive h), Heq.
  - now rewrite <- Permutation_rev.
  - intros u v Hin. apply edge_both_ways, Hsteps. now apply path_steps_rev.
  - intros u v Hin. rewrite !path_steps_rev. now apply or_comm, Hrequired.
  - unfold has_ends in *. destruct (ends Q) as [|s [|t [|? ?]]]; [exact I | | |contradiction];
      rewrite ?starts_rev, ?stops_rev; tauto.
Qed.

Lemma cycle_steps_rev : forall (h : list V) u v,
  In (u, v) (cycle_steps (rev h)) <-> In (v, u) (cycle_steps h).
Proof.
  intros [|x h] u v; [reflexivity|]. simpl rev. rewrite cycle_steps_turn.
  unfold cycle_steps. rewrite <- path_steps_rev. rewrite rev_app_distr. simpl rev.
  now rewrite rev_involutive.
Qed.

Theorem cycle_backwards : forall h, ham_cycle Q h -> ham_cycle Q (rev h).
Proof.
  intros h (Hlength & Hperm & Hsteps & Hrequired).
  split; [now rewrite rev_length|]. split; [now rewrite <- Permutation_rev|]. split.
  - intros u v Hin. apply edge_both_ways, Hsteps. now apply cycle_steps_rev.
  - intros u v Hin. rewrite !cycle_steps_rev. now apply or_comm, Hrequired.
Qed.

End Known.

(** ** Other names for the vertices *)

Section Renamed.

Context {V W : Type}.
Variable Q : query V.
Variable R : query W.
Variable name : V -> W.

Definition both (e : V * V) : W * W := (name (fst e), name (snd e)).

Hypothesis one_to_one : forall u v, name u = name v -> u = v.
Hypothesis same_vertices : Permutation (vertices R) (map name (vertices Q)).
Hypothesis same_edges : forall u v, adjacent R (name u) (name v) = adjacent Q u v.
Hypothesis same_ends : ends R = map name (ends Q).
Hypothesis same_required : required R = map both (required Q).
Hypothesis same_forbidden : forbidden R = map both (forbidden Q).

Lemma in_both : forall u v l, In (name u, name v) (map both l) <-> In (u, v) l.
Proof.
  intros u v l. rewrite in_map_iff. split.
  - intros ([x y] & Heq & Hin). injection Heq as Hx Hy.
    apply one_to_one in Hx, Hy. now subst.
  - intros Hin. now exists (u, v).
Qed.

Lemma path_steps_map : forall h, path_steps (map name h) = map both (path_steps h).
Proof.
  induction h as [|x [|y h] IH]; [reflexivity..|].
  change ((name x, name y) :: path_steps (map name (y :: h))
    = both (x, y) :: map both (path_steps (y :: h))).
  now rewrite IH.
Qed.

Lemma cycle_steps_map : forall h, cycle_steps (map name h) = map both (cycle_steps h).
Proof.
  intros [|x h]; [reflexivity|]. unfold cycle_steps. rewrite <- path_steps_map, map_app.
  reflexivity.
Qed.

Lemma visits_renamed : forall h steps,
  visits Q h steps -> visits R (map name h) (map both steps).
Proof.
  intros h steps (Hperm & Hsteps & Hrequired). split; [|split].
  - rewrite same_vertices. now apply Permutation_map.
  - intros u v Hin. apply in_map_iff in Hin. destruct Hin as ([x y] & Heq & Hin).
    injection Heq as <- <-. apply Hsteps in Hin. destruct Hin as (Hadjacent & Hno & Hno').
    unfold edge. rewrite same_edges, same_forbidden, !in_both. now split.
  - intros u v Hin. rewrite same_required in Hin. apply in_map_iff in Hin.
    destruct Hin as ([x y] & Heq & Hin). injection Heq as <- <-. rewrite !in_both.
    now apply Hrequired.
Qed.

Theorem path_renamed : forall h, ham_path Q h -> ham_path R (map name h).
Proof.
  intros h (Hsome & Hvisits & Hends). split; [|split].
  - destruct h; [contradiction | discriminate].
  - rewrite path_steps_map. now apply visits_renamed.
  - assert (Hstarts : forall s, starts h s -> starts (map name h) (name s)).
    { intros s [rest ->]. now exists (map name rest). }
    assert (Hstops : forall s, stops h s -> stops (map name h) (name s)).
    { intros s [rest ->]. exists (map name rest). now rewrite map_app. }
    unfold has_ends in *. rewrite same_ends.
    destruct (ends Q) as [|s [|t [|? ?]]]; simpl; intuition auto.
Qed.

Theorem cycle_renamed : forall h, ham_cycle Q h -> ham_cycle R (map name h).
Proof.
  intros h (Hlength & Hvisits). split; [now rewrite map_length|].
  rewrite cycle_steps_map. now apply visits_renamed.
Qed.

End Renamed.
