(** * Endless claims: the tours of a query

    A Hamiltonian path is a tour through one more vertex, the apex, that is joined to all
    others. [None] is the apex. *)

From Coq Require Import Bool List Arith PArith Permutation Lia.
From Certify Require Import Statement Steps Normal Facts EndlessPlan EndlessSteps EndlessTour.
Import ListNotations.

(** A query that asks for nothing but a path or cycle, and whose rule says the same both
    ways. *)
Definition plain {V : Type} (Q : query V) : Prop :=
  ends Q = [] /\ required Q = [] /\ forbidden Q = [] /\
  forall u v, In u (vertices Q) -> In v (vertices Q) -> adjacent Q u v = adjacent Q v u.

Section Query.

Context {V : Type}.
Variable Q : query V.
Hypothesis is_plain : plain Q.

Definition lifted (u v : option V) : bool :=
  match u, v with
  | Some u, Some v => adjacent Q u v
  | None, None => false
  | _, _ => true
  end.

Lemma lifted_sym : forall u v,
  (forall x, u = Some x -> In x (vertices Q)) -> (forall x, v = Some x -> In x (vertices Q)) ->
  lifted u v = lifted v u.
Proof. intros [u |] [v |] u_in v_in; try reflexivity. apply is_plain; auto. Qed.

Lemma plain_edge : forall u v, edge Q u v <-> adjacent Q u v = true.
Proof.
  intros u v. destruct is_plain as (_ & _ & none & _). unfold edge. rewrite none. cbn. tauto.
Qed.

Lemma plain_visits : forall h steps, visits Q h steps <->
  Permutation h (vertices Q) /\ forall u v, In (u, v) steps -> adjacent Q u v = true.
Proof.
  intros h steps. destruct is_plain as (_ & none & _). unfold visits. rewrite none.
  setoid_rewrite plain_edge. cbn. intuition.
Qed.

Lemma some_back : forall (l : list V) h, Permutation h (map Some l) ->
  exists g, h = map Some g /\ Permutation g l.
Proof.
  intros l h same. apply Permutation_map_inv in same as (g & -> & same).
  exists g. split; [reflexivity | now apply Permutation_sym].
Qed.

Lemma cycle_tour : (exists h, ham_cycle Q h) <-> exists h, tour lifted (map Some (vertices Q)) h.
Proof.
  split.
  - intros (h & long & whole). apply plain_visits in whole as [all along].
    exists (map Some h). split; [now rewrite map_length |]. split; [now apply Permutation_map |].
    intros u v step. rewrite cycle_steps_map in step.
    apply in_map_iff in step as ([x y] & [= <- <-] & step). now apply along.
  - intros (h & long & all & along). apply some_back in all as (g & -> & all).
    exists g. split; [now rewrite map_length in long |]. apply plain_visits. split; [exact all |].
    intros u v step. apply (along (Some u) (Some v)). rewrite cycle_steps_map.
    apply (in_map (fun e => (Some (fst e), Some (snd e))) _ _ step).
Qed.

Lemma path_inside : forall (A : Type) (l : list A) x y e,
  In e (path_steps l) -> In e (path_steps (x :: l ++ [y])).
Proof.
  intros A [| z l] x y e here; [easy |]. cbn [app]. rewrite path_steps_cons. right.
  destruct (@exists_last _ (z :: l)) as (m & b & E); [easy |].
  change (z :: l ++ [y]) with ((z :: l) ++ [y]). rewrite E in *. rewrite <- app_assoc.
  cbn [app]. rewrite path_steps_app. apply in_or_app. now left.
Qed.

(** The steps of a path between two visits of the apex. *)
Lemma path_around : forall (l : list (option V)) u v,
  In (u, v) (path_steps (None :: l ++ [None])) ->
  In (u, v) (path_steps l) \/ u = None \/ v = None.
Proof.
  intros [| z l] u v here.
  - destruct here as [[= <- <-] | []]. auto.
  - cbn [app] in here. rewrite path_steps_cons in here.
    destruct here as [[= <- <-] | here]; [auto |].
    destruct (@exists_last _ (z :: l)) as (m & b & E); [easy |].
    change (z :: l ++ [None]) with ((z :: l) ++ [None]) in here. rewrite E in *.
    rewrite <- app_assoc in here. cbn [app] in here. rewrite path_steps_app in here.
    apply in_app_or in here as [here | [[= <- <-] | []]]; auto.
Qed.

Lemma path_tour : 2 <= length (vertices Q) ->
  (exists h, ham_path Q h) <-> exists h, tour lifted (None :: map Some (vertices Q)) h.
Proof.
  intros two. split.
  - intros (h & some & whole & _). apply plain_visits in whole as [all along].
    exists (None :: map Some h). split; [| split].
    + cbn [length]. rewrite map_length, (Permutation_length all). lia.
    + now apply perm_skip, Permutation_map.
    + intros u v step. cbn [cycle_steps app] in step.
      assert (not_apex : u = None /\ v = None -> False).
      { intros [-> ->]. assert (one : NoDup (None :: map (@Some V) []))
          by (constructor; [easy | constructor]).
        clear one. destruct h as [| x h]; [easy |].
        cbn [map app] in step. rewrite path_steps_cons in step.
        destruct step as [step | step]; [discriminate |].
        assert (clean : forall l y,
                  ~ In (None, None) (path_steps (Some y :: map (@Some V) l ++ [None]))).
        { induction l as [| z l IH]; intros y here.
          - destruct here as [here | []]. discriminate.
          - cbn [map app] in here. rewrite path_steps_cons in here.
            destruct here as [here | here]; [discriminate | now apply (IH z)]. }
        exact (clean h x step). }
      apply path_around in step as [step | apex].
      * rewrite path_steps_map in step. apply in_map_iff in step as ([x y] & [= <- <-] & step).
        now apply along.
      * destruct u, v; try reflexivity; [now destruct apex | now destruct not_apex].
  - intros (h & long & all & along).
    destruct (rotate h None) as (l & same & steps).
    { apply (Permutation_in _ (Permutation_sym all)). now left. }
    assert (rest : Permutation l (map Some (vertices Q))).
    { apply (Permutation_cons_inv (a := None)). now rewrite same. }
    apply some_back in rest as (g & -> & rest).
    exists g. split; [| split].
    + intros ->. apply Permutation_length in rest. cbn in rest. lia.
    + apply plain_visits. split; [exact rest |]. intros u v step.
      apply (along (Some u) (Some v)), (Permutation_in _ steps).
      cbn [cycle_steps app]. apply path_inside. rewrite path_steps_map.
      apply (in_map (fun e => (Some (fst e), Some (snd e))) _ _ step).
    + unfold has_ends. destruct is_plain as (-> & _). exact I.
Qed.

(** ** Both at once *)

(** Whether a path is asked for, or a cycle. *)
Definition has (path : bool) : Prop :=
  if path then exists h, ham_path Q h else exists h, ham_cycle Q h.

Definition apex (path : bool) : list (option V) := if path then [None] else [].

Lemma all_sym : forall path fixed body, Permutation (vertices Q) (fixed ++ body) ->
  forall u v, In u ((apex path ++ map Some fixed) ++ map Some body) ->
    In v ((apex path ++ map Some fixed) ++ map Some body) -> lifted u v = lifted v u.
Proof.
  intros path fixed body same.
  assert (inside : forall u, In u ((apex path ++ map Some fixed) ++ map Some body) ->
            forall x, u = Some x -> In x (vertices Q)).
  { intros u here x ->. rewrite <- app_assoc, <- map_app in here.
    apply in_app_or in here as [here | here]; [destruct path; [now destruct here | easy] |].
    apply in_map_iff in here as (y & [= ->] & here).
    now apply (Permutation_in _ (Permutation_sym same)). }
  intros u v u_in v_in. apply lifted_sym; now apply inside.
Qed.

Lemma tour_same : forall (A : Type) (meet : A -> A -> bool) l m, Permutation l m ->
  (exists h, tour meet l h) <-> exists h, tour meet m h.
Proof.
  intros A meet l m same. split; intros (h & long & all & along); exists h;
    (split; [exact long | split; [| exact along]]); now rewrite all.
Qed.

Lemma has_tour : forall path fixed body, Permutation (vertices Q) (fixed ++ body) ->
  3 <= length (apex path) + length fixed + length body ->
  has path <-> exists h, tour lifted ((apex path ++ map Some fixed) ++ map Some body) h.
Proof.
  intros path fixed body same three.
  assert (size : length (vertices Q) = length fixed + length body)
    by now rewrite (Permutation_length same), app_length.
  rewrite <- app_assoc, <- map_app.
  rewrite (tour_same _ lifted _ (apex path ++ map Some (vertices Q)))
    by now apply Permutation_app_head, Permutation_map, Permutation_sym.
  destruct path; cbn [has apex app]; [apply path_tour | apply cycle_tour].
  cbn [apex length] in three. lia.
Qed.

End Query.
