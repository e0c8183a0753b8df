(** * Witnesses: the path or cycle itself, as the numbers of its vertices in order *)

From Coq Require Import Bool List Permutation PArith FMapPositive Lia.
From Certify Require Import Statement Question Normal NormalFacts.
Import ListNotations.
Open Scope lazy_bool_scope.

Section Witness.

Context {V : Type} {named : Named V}.
Variable Q : query V.

Definition by_number : PositiveMap.t V :=
  fold_right (fun p m => PositiveMap.add (fst p) (snd p) m) (PositiveMap.empty V) (numbered Q).

(** The vertices with the given numbers. A vertex visited is taken out of the map, so
    that none is visited twice. *)
Fixpoint visit (left : PositiveMap.t V) (order : list vertex) : option (list (vertex * V)) :=
  match order with
  | [] => Some []
  | i :: order' =>
      match PositiveMap.find i left with
      | None => None
      | Some v => option_map (cons (i, v)) (visit (PositiveMap.remove i left) order')
      end
  end.

(** The steps are edges, and the required edges are among them. *)
Definition steps_fine (steps : list (V * V)) : bool :=
  forallb (fun e => is_edge Q (fst e) (snd e)) steps
  &&& forallb (fun e => holds (same e) steps ||| holds (same (snd e, fst e)) steps) (required Q).

Definition starts_with (h : list V) (s : V) : bool :=
  match h with
  | u :: _ => same u s
  | [] => false
  end.

Fixpoint stops_with (h : list V) (t : V) : bool :=
  match h with
  | [u] => same u t
  | _ :: h' => stops_with h' t
  | [] => false
  end.

Definition ends_fine (h : list V) : bool :=
  match ends Q with
  | [] => true
  | [s] => starts_with h s ||| stops_with h s
  | [s; t] => (starts_with h s &&& stops_with h t) ||| (starts_with h t &&& stops_with h s)
  | _ => false
  end.

(** The order of as many vertices as there are, each visited once: of all of them. *)
Definition visited (order : list vertex) : option (list V) :=
  if Nat.eqb (length order) (length (vertices Q))
  then option_map (map snd) (visit by_number order)
  else None.

Definition check_path (order : list vertex) : bool :=
  match visited order with
  | Some ((_ :: _) as h) => steps_fine (path_steps h) &&& ends_fine h
  | _ => false
  end.

Definition check_cycle (order : list vertex) : bool :=
  match visited order with
  | Some ((_ :: _ :: _ :: _) as h) => steps_fine (cycle_steps h)
  | _ => false
  end.

(** ** Why these are the path and the cycle *)

Lemma by_number_in : forall i v, PositiveMap.find i by_number = Some v -> In (i, v) (numbered Q).
Proof.
  unfold by_number. intros i v. induction (numbered Q) as [|[j w] l IH]; simpl.
  - rewrite PositiveMap.gempty. discriminate.
  - destruct (Pos.eq_dec i j) as [->|Hij].
    + rewrite PositiveMap.gss. intros Heq. injection Heq as ->. now left.
    + rewrite PositiveMap.gso by assumption. auto.
Qed.

Lemma visit_spec : forall order left p, visit left order = Some p ->
  NoDup (map fst p) /\ length p = length order /\
  forall i v, In (i, v) p -> PositiveMap.find i left = Some v.
Proof.
  induction order as [|i order IH]; simpl; intros left p Hvisit.
  - injection Hvisit as <-. repeat split; [constructor | simpl; tauto].
  - destruct (PositiveMap.find i left) as [v|] eqn:Hfind; [|discriminate].
    destruct (visit _ order) as [p'|] eqn:Hrest; [|discriminate].
    injection Hvisit as <-. destruct (IH _ _ Hrest) as (Hdup & Hlen & Hfound).
    assert (Hgone : forall j w, In (j, w) p' -> j <> i).
    { intros j w Hin ->. apply Hfound in Hin. rewrite PositiveMap.grs in Hin. discriminate. }
    simpl. split; [|split; [now rewrite Hlen|]].
    + constructor; [|assumption]. intros Hin. apply in_map_iff in Hin.
      destruct Hin as ([j w] & Heq & Hin). apply (Hgone j w Hin Heq).
    + intros j w [Heq | Hin].
      * now injection Heq as <- <-.
      * specialize (Hgone j w Hin). apply Hfound in Hin.
        now rewrite PositiveMap.gro in Hin by auto.
Qed.

Lemma visited_all : forall order h, visited order = Some h -> Permutation h (vertices Q).
Proof.
  unfold visited. intros order h.
  destruct (PeanoNat.Nat.eqb_spec (length order) (length (vertices Q))) as [Hlen|]; [|discriminate].
  destruct (visit by_number order) as [p|] eqn:Hvisit; [|discriminate].
  intros Heq. injection Heq as <-.
  destruct (visit_spec _ _ _ Hvisit) as (Hdup & Hsame & Hfound).
  rewrite <- (numbered_snd Q). apply Permutation_map. apply NoDup_Permutation_bis.
  - now apply NoDup_map_inv in Hdup.
  - rewrite Hsame, Hlen, <- (numbered_snd Q), map_length. apply le_n.
  - intros [i v] Hin. now apply by_number_in, Hfound.
Qed.

Lemma steps_fine_spec : forall h steps, Permutation h (vertices Q) ->
  steps_fine steps = true -> visits Q h steps.
Proof.
  intros h steps Hperm. unfold steps_fine.
  rewrite <- andb_lazy_alt, andb_true_iff, !forallb_forall. intros [Hedges Hrequired].
  split; [assumption | split; intros u v Hin].
  - apply is_edge_spec. now apply (Hedges (u, v)).
  - apply Hrequired in Hin. rewrite <- orb_lazy_alt, orb_true_iff in Hin.
    destruct Hin as [Hin | Hin]; apply holds_same in Hin; auto.
Qed.

Lemma starts_with_spec : forall h s, starts_with h s = true -> starts h s.
Proof.
  intros [|u h] s; simpl; [discriminate|]. intros Hsame. apply same_spec in Hsame.
  subst. now exists h.
Qed.

Lemma stops_with_spec : forall h t, stops_with h t = true -> stops h t.
Proof.
  induction h as [|u h IH]; intros t; [discriminate|]. destruct h as [|v h].
  - intros Hsame. simpl in Hsame. apply same_spec in Hsame. subst. now exists [].
  - intros Hstops. destruct (IH t Hstops) as [rest Heq]. exists (u :: rest). now rewrite Heq.
Qed.

Lemma ends_fine_spec : forall h, ends_fine h = true -> has_ends Q h.
Proof.
  intros h. unfold ends_fine, has_ends.
  destruct (ends Q) as [|s [|t [|? ?]]]; try tauto; try discriminate;
    rewrite <- ?andb_lazy_alt, <- ?orb_lazy_alt, orb_true_iff, ?andb_true_iff;
    intuition auto using starts_with_spec, stops_with_spec.
Qed.

Theorem check_path_sound : forall order, check_path order = true -> exists h, ham_path Q h.
Proof.
  intros order. unfold check_path.
  destruct (visited order) as [[|u h]|] eqn:Hvisited; try discriminate.
  rewrite <- andb_lazy_alt, andb_true_iff. intros [Hsteps Hends].
  exists (u :: h). split; [discriminate | split].
  - apply steps_fine_spec; [|assumption]. now apply visited_all with order.
  - now apply ends_fine_spec.
Qed.

Theorem check_cycle_sound : forall order, check_cycle order = true -> exists h, ham_cycle Q h.
Proof.
  intros order. unfold check_cycle.
  destruct (visited order) as [[|u [|v [|w h]]]|] eqn:Hvisited; try discriminate.
  intros Hsteps. exists (u :: v :: w :: h). split; [simpl; lia|].
  apply steps_fine_spec; [|assumption]. now apply visited_all with order.
Qed.

End Witness.
